import { expect, it } from 'vitest';
import { loadAtSocket } from '../cli/at-a-socket.js';
import { ended, start } from './railproof.js';

it('a trial of a driver that is stopped in the middle leaves the load off, at 0 A in constant current', async () => {
  let stop = (): void => undefined;
  let hesitant = false;
  const load = await loadAtSocket((message) => {
    if (message.startsWith('VOLT')) {
      hesitant = true;
      stop();
    }
    if (message !== 'SYST:ERR?' || !hesitant) return undefined;
    hesitant = false;
    return 'ignore';
  });
  const child = start(['drivers', '--try', load.driver, '--connection', load.address]);
  stop = () => child.kill('SIGINT');
  const { status, stderr } = await ended(child);
  expect(load.heard.filter((message) => !message.endsWith('?')).slice(-4)).toEqual([
    'VOLT 150',
    'FUNC CURR',
    'CURR 0',
    'INP OFF',
  ]);
  expect(load.state.input).toBe('0');
  expect(stderr).toContain('stopped with Ctrl-C');
  expect(stderr.trimEnd().split('\n').at(-1)).toBe('The load is off; it was read back.');
  expect(status).toBe(3);
});
