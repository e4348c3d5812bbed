import type { Baseline } from '../../src/record/baseline.js';
import { headerFormat, type RunHeader } from '../../src/record/run-header.js';

/** What a run on K1 might have begun with. */
export const someHeader: RunHeader = {
  format: headerFormat,
  program: { name: 'railproof', version: '0.1.0' },
  began: '2026-11-20T09:00:00.250Z',
  modules: [
    {
      name: 'K1',
      description: '15 V brick from a retired label printer',
      rated: { voltage: 15, current: 4, ambient: 40 },
      protectionClass: 'I',
      input: 'mains',
      outputIsolation: 'unknown',
      changes: [{ date: '2026-11-14', what: 'link from output to earth removed' }],
    },
  ],
  circuit: 'single',
  bench: {
    name: 'nursery bench',
    leads: { resistance: 0.035, uncertainty: 0.005 },
    voltageFrom: 'meter-at-module',
    simulated: false,
  },
  procedure: { name: 'real-limit', title: 'What one module really delivers', cautions: ['mains'] },
  steps: [{ kind: 'wait', summary: 'waits 5 s', settings: { for: 5 } }],
  criteria: [
    {
      finding: 'usable-current',
      requirement: { kind: 'at-least', value: { kind: 'share', ratio: 1, of: 'rated-current' } },
    },
    { finding: 'limit-style', requirement: { kind: 'is', word: 'hiccup' } },
  ],
  derating: { margin: 0.8, aboveNameplate: 'never' },
  instruments: [
    {
      role: 'load',
      driver: 'load-input-scpi',
      address: 'tcp://127.0.0.1:5025',
      identity: 'NURSERY,LOAD,1,1',
      accuracy: { voltage: { ofReading: 0.001, fixed: 0.01, resolution: 0.001 } },
      ratings: { voltage: 150, current: 40, leastVoltage: 1 },
    },
  ],
  files: [{ kind: 'module', path: 'K1.yaml', sha256: '00', text: 'railproof: module 1\n' }],
};

/** What K1 was before its earth link was removed. */
export const someBaseline: Baseline = {
  run: '20261101T080000Z-K1-acceptance',
  began: '2026-11-01T08:00:00.000Z',
  procedure: 'acceptance',
  modules: ['K1'],
  findings: [
    {
      name: 'usable-current',
      value: 5,
      dimension: 'current',
      standardUncertainty: 0.01,
      interval: [4.98, 5.02],
      bound: 'least',
      note: 'at least this much: no limit was met up to 5 A',
    },
    {
      name: 'earth-relation',
      value: 'bonded',
      dimension: null,
      standardUncertainty: null,
      interval: null,
      note: '',
    },
  ],
  tolerance: {
    name: 'earth-link-removed',
    title: 'After removing the earth link and adding a reverse diode',
    findings: [
      { finding: 'earth-relation', expected: { kind: 'becomes', word: 'isolated' } },
      { finding: 'usable-current', expected: { kind: 'within', limit: { kind: 'share', ratio: 0.05 } } },
      {
        finding: 'open-circuit-voltage',
        expected: { kind: 'within', limit: { kind: 'absolute', value: 0.05 } },
      },
      { finding: 'limit-style', expected: { kind: 'same' } },
    ],
  },
};
