import { describe, expect, it } from 'vitest';
import { lastLine, loadAtSocket, railproof } from './at-a-socket.js';

const mayBeOn = /^THE LOAD MAY STILL BE ON\. Switch its input off at its front panel/;

describe('drivers --try', () => {
  it('walks through a driver and ends with the load off, at 0 A in constant current', async () => {
    const load = await loadAtSocket();
    const { status, stdout, stderr } = await railproof(...trying(load));
    expect(stdout).toMatch(/^understood +it is off +INP\? +\d+ ms → 0 {2}off$/m);
    expect(stdout).toMatch(/^not-sent +input-on +INP ON +would switch on$/m);
    expect(stdout).toMatch(/^understood +set-voltage +VOLT 150 /m);
    expect(lastLine(stdout)).toBe('18 of 18 messages understood');
    expect(stderr).toBe(`load-input-scpi at ${load.address}\nThe load is off; it was read back.\n`);
    expect(status).toBe(0);
    const told = load.heard.filter((message) => !message.endsWith('?'));
    expect(told[0]).toBe('INP OFF');
    expect(told.slice(-3)).toEqual(['FUNC CURR', 'CURR 0', 'INP OFF']);
    expect(told).not.toContain('VOLT 0');
  });

  it('never shorts a module with a driver whose words for off are refused', async () => {
    const load = await loadAtSocket(undefined, (driver) => driver.replaceAll('"INP OFF"', '"LAMP OFF"'));
    const { status, stdout, stderr } = await railproof(...trying(load));
    expect(load.state.input).toBe('1');
    expect(load.heard).toEqual(['LAMP OFF', '*IDN?', 'INP?', 'LAMP OFF']);
    expect(stdout).toMatch(/^refused +it is off .* it says that it is on; nothing more is tried/m);
    expect(stderr).not.toMatch(/is off|stays off/);
    expect(lastLine(stderr)).toMatch(mayBeOn);
    expect(status).toBe(69);
  });

  it('says so, too, in the midst of JSON, which stays one object', async () => {
    const load = await loadAtSocket((message) => (message === 'INP?' ? { answer: '1' } : undefined));
    const { status, stdout, stderr } = await railproof(...trying(load), '--json');
    expect(JSON.parse(stdout)).toMatchObject({
      format: 'railproof/trial 1',
      results: [{ part: 'identity' }, { part: 'proof', verdict: 'refused' }],
    });
    expect(stderr).toMatch(mayBeOn);
    expect(status).toBe(69);
  });

  it('does not say that the load is off when it vanishes half-way', async () => {
    const load = await loadAtSocket((message) => (message.startsWith('VOLT') ? 'hang-up' : undefined));
    const { status, stderr } = await railproof(...trying(load));
    expect(stderr).toContain('connection lost');
    expect(stderr).not.toMatch(/is off/);
    expect(lastLine(stderr)).toMatch(mayBeOn);
    expect(status).toBe(69);
  });

  it('of a refused message ends with 1, the load being off', async () => {
    const load = await loadAtSocket(undefined, (driver) => driver.replace('CURR:PROT', 'DOOR:PROT'));
    const { status, stdout, stderr } = await railproof(...trying(load));
    expect(stdout).toMatch(/^refused +protect-current +DOOR:PROT 40 .*-113 "Undefined header"/m);
    expect(lastLine(stderr)).toBe('The load is off; it was read back.');
    expect(status).toBe(1);
  });
});

function trying({ driver, address }: { readonly driver: string; readonly address: string }): string[] {
  return ['drivers', '--try', driver, '--connection', address];
}
