import { readFileSync } from 'node:fs';
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
    expect(stdout).toMatch(/^understood +it is off +[\d.]+ ms +off\n {2}> INP\?\\n {2}< 0\\n$/m);
    expect(stdout).toMatch(/^not-sent +input-on +"INP ON" +would switch on$/m);
    expect(stdout).toMatch(
      /^understood +set-voltage +[\d.]+ ms\n {2}> VOLT 150\\n {2}> SYST:ERR\?\\n {2}< 0,"No error"\\n$/m,
    );
    expect(lastLine(stdout)).toBe('18 of 18 messages understood');
    expect(stderr).toBe(
      `load-input-scpi at ${load.address}\nFinding out how fast it may be spoken to; this may take a minute.\nThe load is off; it was read back.\n`,
    );
    expect(status).toBe(0);
    const told = load.heard.filter((message) => !message.endsWith('?'));
    expect(told.slice(0, 2)).toEqual(['', 'INP OFF']);
    expect(told.slice(-3)).toEqual(['FUNC CURR', 'CURR 0', 'INP OFF']);
    expect(told).not.toContain('INP ON');
    expect(told).not.toContain('VOLT 0');
  });

  it('never shorts a module with a driver whose words for off are refused', async () => {
    const load = await loadAtSocket(undefined, (driver) => driver.replaceAll('"INP OFF"', '"LAMP OFF"'));
    const { status, stdout, stderr } = await railproof(...trying(load));
    expect(load.state.input).toBe('1');
    expect(load.heard).toEqual(['', 'LAMP OFF', '*IDN?', '*IDN?', 'INP?', 'LAMP OFF']);
    expect(stdout).toMatch(/^refused +it is off .* it says that it is on; nothing more is\s+tried/m);
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
    expect(stdout).toMatch(/^refused +protect-current .*-113 "Undefined header"\n {2}> DOOR:PROT 40\\n/m);
    const lines = readFileSync(load.driver, 'utf8').split('\n');
    const line = lines.findIndex((each) => each.includes('DOOR:PROT')) + 1;
    expect(line).toBeGreaterThan(1);
    // It names the line to mend, of this message and of no other.
    expect(stdout.match(/^ {2}see .*$/gm)).toEqual([`  see ${load.driver}:${line}`]);
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
    expect(stdout).toMatch(/^understood +make-safe .*\n {2}> ROUT:OPEN:ALL\\n/m);
    expect(stdout).toMatch(
      /^not-sent +close-channel +"ROUT:CLOS \(@\{channel\}\)" would\s+connect\s+something$/m,
    );
    expect(stdout).toMatch(
      /^understood +closed-channel +[\d.]+ ms +none\n {2}> ROUT:CLOS:STAT\?\\n {2}< \(@\)\\n$/m,
    );
    expect(stderr).not.toMatch(/load/i);
    expect(status).toBe(0);
  });

  it('reads a thermometer, which nothing can make safer', async () => {
    const { status, stdout, stderr } = await tried('thermometer', 'thermometer-query-scpi');
    expect(stdout).toMatch(
      /^understood +temperature +[\d.]+ ms +2\d[\d.]* °C\n {2}> MEAS:TEMP\?\\n {2}< \+2\.\d+E\+01\\n$/m,
    );
    expect(lastLine(stdout)).toBe('4 of 4 messages understood');
    expect(stderr).not.toMatch(/load/i);
    expect(status).toBe(0);
  });

  it('goes through both modes of a meter, and leaves it at dc voltage', async () => {
    const { status, stdout } = await tried('meter', 'meter-read-scpi');
    expect(stdout).toMatch(/^understood +measure-resistance .*\n {2}> CONF:RES\\n/m);
    expect(stdout).toMatch(/^understood +measures-voltage +[\d.]+ ms +yes$/m);
    expect(stdout).toMatch(/^understood +measures-resistance +[\d.]+ ms +yes$/m);
    const last = stdout
      .split('\nHow fast')[0]
      ?.split('\n')
      .filter((line) => /^[a-z]/.test(line))
      .slice(-2);
    expect(last?.[0]).toMatch(/^understood +measure-voltage/);
    expect(last?.[1]).toMatch(/^understood +make-safe/);
    expect(status).toBe(0);
  });

  it('asks a meter that sets itself', async () => {
    const { status, stdout } = await tried('meter-1', 'meter-query-scpi');
    expect(stdout).toMatch(/^understood +resistance +[\d.]+ ms +[\d.]+ .?Ω\n {2}> MEAS:RES\?\\n/m);
    expect(status).toBe(0);
  });
});
