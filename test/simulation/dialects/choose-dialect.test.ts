import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parseDriver } from '../../../src/files/read-driver.js';
import { dialectFor } from '../../../src/simulation/dialects/choose-dialect.js';
import {
  NotUnderstoodBySimulationError,
  UnknownDialectError,
} from '../../../src/simulation/simulation-errors.js';
import { loadDriver, meterDriver } from '../bench-parts.js';

const thrownBy = (act: () => unknown): unknown => {
  try {
    act();
  } catch (error) {
    return error;
  }
  return undefined;
};

describe('the dialect for a driver', () => {
  it('is one that understands all its messages', () => {
    expect(dialectFor(loadDriver).name).toBe('standard-load');
    expect(dialectFor(meterDriver).name).toBe('configured-meter');
    const byQuery = {
      ...meterDriver,
      prepare: [],
      readings: {
        voltage: { kind: 'number', ask: [{ text: 'MEAS:VOLT:DC?' }], dimension: 'voltage', factor: 1 },
      },
    } as const;
    expect(dialectFor(byQuery).name).toBe('query-meter');
  });

  it.each([
    ['load-input-scpi', 'standard-load'],
    ['load-source-scpi', 'standard-load'],
    ['load-remote-scpi', 'remote-load'],
    ['load-channel-scpi', 'channel-load'],
    ['load-short-scpi', 'short-load'],
    ['meter-read-scpi', 'configured-meter'],
    ['meter-query-scpi', 'query-meter'],
    ['meter-function-scpi', 'function-meter'],
    ['scanner-route-scpi', 'routed-scanner'],
    ['thermometer-query-scpi', 'query-thermometer'],
    ['source-output-scpi', 'dc-source'],
  ])('of the shipped family %s is %s', (family, dialect) => {
    const path = new URL(`../../../drivers/${family}.yaml`, import.meta.url);
    expect(dialectFor(parseDriver(readFileSync(path, 'utf8'), family)).name).toBe(dialect);
  });

  it('is the one that is named', () => {
    expect(dialectFor(meterDriver, 'query-meter').name).toBe('query-meter');
    const unknown = thrownBy(() => dialectFor(meterDriver, 'standard-load'));
    expect(unknown).toBeInstanceOf(UnknownDialectError);
    expect((unknown as Error).message).toBe(
      'there is no simulated meter that speaks "standard-load"; there are configured-meter, query-meter, function-meter',
    );
  });

  it('is refused with the message that none understands', () => {
    const strange = {
      ...loadDriver,
      operations: { ...loadDriver.operations, 'set-current': [{ text: 'LOADCURRENT {amps}' }] },
    };
    const error = thrownBy(() => dialectFor(strange));
    expect(error).toBeInstanceOf(NotUnderstoodBySimulationError);
    expect(error).toMatchObject({ unknownMessage: 'LOADCURRENT 1', driver: 'load-input-scpi', exitCode: 65 });
  });

  it('is refused for a question that would never be answered', () => {
    const mute = {
      ...meterDriver,
      readings: {
        voltage: { kind: 'number', ask: [{ text: 'CONF:VOLT:DC' }], dimension: 'voltage', factor: 1 },
      },
    } as const;
    expect(thrownBy(() => dialectFor(mute))).toMatchObject({ unknownMessage: 'CONF:VOLT:DC' });
  });
});
