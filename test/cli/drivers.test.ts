import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { serveBench } from '../../src/simulation/serve.js';
import { groupBench } from '../bench/group-bench.js';
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

describe('drivers', () => {
  it('lists the shipped ones with their roles', async () => {
    const { status, stdout } = await railproof('drivers');
    expect(status).toBe(0);
    expect(stdout).toMatch(/^scanner-route-scpi +scanner +Scanners that close one channel/m);
    expect(stdout).toMatch(/^thermometer-query-scpi +thermometer +Thermometers that measure/m);
    const { drivers } = JSON.parse((await railproof('drivers', '--json')).stdout) as { drivers: unknown[] };
    expect(drivers).toHaveLength(11);
  });
});

describe('drivers --try on instruments other than a load', () => {
  const tried = async (post: 'meter' | 'scanner' | 'thermometer' | 'meter-1', name: string) => {
    const { description, drivers } = await groupBench({
      measuredBy: post === 'meter-1' ? 'meters' : 'scanner',
    });
    const served = await serveBench({ bench: description, drivers, clock: realClock });
    onTestFinished(() => served.close());
    return railproof('drivers', '--try', name, '--connection', served.addresses[post] ?? '');
  };

  it('opens all channels of a scanner, connects none, and says which is closed', async () => {
    const { status, stdout, stderr } = await tried('scanner', 'scanner-route-scpi');
    expect(stdout).toMatch(/^understood +make-safe +ROUT:OPEN:ALL /m);
    expect(stdout).toMatch(/^not-sent +close-channel +ROUT:CLOS \(@\{channel\}\) +would connect something$/m);
    expect(stdout).toMatch(/^understood +closed-channel +ROUT:CLOS:STAT\? +\d+ ms → \(@\) {2}none$/m);
    expect(stdout.trimEnd().split('\n').at(-2)).toMatch(/^understood +make-safe +ROUT:OPEN:ALL/);
    expect(stderr).not.toMatch(/load/i);
    expect(status).toBe(0);
  });

  it('reads a thermometer, which nothing can make safer', async () => {
    const { status, stdout, stderr } = await tried('thermometer', 'thermometer-query-scpi');
    expect(stdout).toMatch(/^understood +temperature +MEAS:TEMP\? +\d+ ms → \+2\.30\d+E\+01 {2}23/m);
    expect(lastLine(stdout)).toBe('4 of 4 messages understood');
    expect(stderr).not.toMatch(/load/i);
    expect(status).toBe(0);
  });

  it('goes through both modes of a meter, and leaves it at dc voltage', async () => {
    const { status, stdout } = await tried('meter', 'meter-read-scpi');
    expect(stdout).toMatch(/^understood +measure-resistance +CONF:RES /m);
    expect(stdout).toMatch(/^understood +measures-voltage +CONF\? +\d+ ms → "VOLT .*" {2}yes$/m);
    expect(stdout).toMatch(/^understood +measures-resistance +CONF\? +\d+ ms → "VOLT .*" {2}no$/m);
    const last = stdout.trimEnd().split('\n').slice(-3, -1);
    expect(last[0]).toMatch(/^understood +measure-voltage +CONF:VOLT:DC/);
    expect(last[1]).toMatch(/^understood +make-safe/);
    expect(status).toBe(0);
  });

  it('asks a meter that sets itself', async () => {
    const { status, stdout } = await tried('meter-1', 'meter-query-scpi');
    expect(stdout).toMatch(/^understood +resistance +MEAS:RES\? +\d+ ms → \+\d\.\d+E[+-]\d+/m);
    expect(status).toBe(0);
  });
});
