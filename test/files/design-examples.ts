import { z } from 'zod';
import { choice, count, quantity, quantityOrShare } from '../../src/files/building-blocks.js';
import type { Vocabulary } from '../../src/files/vocabulary.js';

/** The examples of the design, word for word: whoever learned the formats there must find them read. */
export const moduleExample = `railproof: module 1
name: K1
description: 15 V brick from a retired label printer
rated: { voltage: 15 V, current: 4 A, ambient: 40 °C }   # ambient optional
protection-class: I            # IEC 61140: I (earthed plug) or II
input: mains                   # mains | dc
output-isolation: unknown      # or a voltage: what output to earth withstands
changes:                       # oldest first
  - { date: 2026-11-14, what: link from output to earth removed }
`;

export const benchExample = `railproof: bench 1
name: corner bench
instruments:
  load:  { driver: load-input-scpi, connection: "tcp://127.0.0.1:5025" }
  meter: { driver: meter-read-scpi, connection: "serial:/dev/ttyUSB0?baud=9600" }
leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }   # there and back; used when nothing senses at the module
voltage-from: meter-at-module   # meter-at-module | load-terminals
limits: { voltage: 60 V, current: 8 A, power: 120 W }    # never exceeded, whatever a procedure asks
`;

/** The design lists one module, but a parallel circuit has two; so the second stands beside it. */
export const simulationExample = `simulation:
  seed: 7
  circuit: parallel             # single | parallel | series
  leads: 35 mΩ                  # module (or group) to load terminals, there and back
  modules:
    - name: K1
      open-circuit-voltage: 15.21 V
      droop-resistance: 18 mΩ
      limit: { current: 5.3 A, style: hiccup, period: 800 ms }   # constant-current | foldback | constant-power | hiccup | latch-off
      unsteady-above: 5.1 A     # optional: oscillates from here to the limit
      noise: 1 mV
      ballast: 50 mΩ            # parallel only; 0 mΩ for none
      reverse-diode: true       # series only
      earth: bonded             # bonded | isolated | a resistance
      thermal: { rise-at-rated: 35 K, time-constant: 12 min, ambient: 23 °C, limit-per-kelvin: -0.2 % }
    - { name: K2, open-circuit-voltage: 15.08 V, droop-resistance: 21 mΩ, limit: { style: foldback, current: 5 A } }
  faults: []                    # e.g. { at: 30 s, what: meter-silent }
`;

export const driverExample = String.raw`railproof: driver 1
name: load-input-scpi
role: load                      # load | meter | scanner | source
summary: Electronic loads that answer INPut, CURRent and MEASure
wire: { send-end: "\n", reply-end: "\n", gap: 0 ms, timeout: 1 s }
identify: "*IDN?"
errors: { ask: "SYST:ERR?", clear: "^[+-]?0\\b" }     # or: errors: none
prepare: ["*CLS"]
release: []
operations:
  make-safe:    ["INP OFF"]
  input-on:     ["INP ON"]
  input-off:    ["INP OFF"]
  current-mode: ["FUNC CURR"]
  voltage-mode: ["FUNC VOLT"]
  set-current:  ["CURR {amps}"]
  set-voltage:  ["VOLT {volts}"]
  protect-current: ["CURR:PROT {amps}"]      # optional; used when there
readings:
  voltage: { ask: "MEAS:VOLT?", unit: V }
  current: { ask: "MEAS:CURR?", unit: A }
  input-state: { ask: "INP?", true-when: "^(1|ON)$" }
settling: 20 ms
ratings: { voltage: 150 V, current: 40 A, power: 200 W, least-voltage: 1 V }
accuracy:                       # what the maker promises; the shipped generic files hold cautious guesses, marked as such
  voltage: { of-reading: 0.1 %, fixed: 10 mV }
  current: { of-reading: 0.2 %, fixed: 10 mA }
`;

export const procedureExample = `railproof: procedure 1
name: real-limit
title: What one module really delivers
cautions: [mains, hot-surfaces]
steps:
  - open-circuit: { for: 5 s }
  - load-ramp: { from: 0 A, to: 100 % of rated-current, points: 21, dwell: 500 ms, readings: 5 }
  - dropout-search: { from: 100 % of rated-current, ceiling: 200 % of rated-current, resolution: 10 mA, sag: 5 % }
criteria:
  - { finding: usable-current, at-least: 100 % of rated-current }
derating: { margin: 80 %, above-nameplate: never }
`;

export const toleranceExample = `railproof: tolerance 1
name: earth-link-removed
title: After removing the earth link and adding a reverse diode
findings:
  - { finding: earth-relation, becomes: isolated }
  - { finding: open-circuit-voltage, within: 0.5 % }      # a share of the earlier value, or a quantity: 50 mV
  - { finding: limit-style, same: true }
`;

export const stagesExample = `railproof: stages 1
name: potting-bench
title: 0 to 32 V for the valve bench
modules:
  W1: [runs/W1-real-limit, runs/W1-isolation]
  W2: [runs/W2-real-limit]
  W3: [runs/W3-real-limit]
ballast: { resistance: 51 mΩ, rating: 3 W }
wires:
  - [W1-, in-]
  - [W2+, W3-]
contacts:
  S1: { makes: [W1+, W2+] }
  S2: { breaks: [W2-, in-] }
  S3: { common: in+, rest: W2+, driven: W3+ }
  S4: { makes: [W1+, W2-] }
diodes:
  D1: { from: W1+, to: in+, forward: 0.5 V }
arrangements:
  low: { group: [W1, W2], driven: [S1] }
  high: { stack: [W1, W2, W3], driven: [S2, S3, S4] }
sequence: break-before-make
linear-stage: { drop-out: 2 V, current: 5 A, dissipation: { full: 60 W, full-to: 25 °C, none-at: 150 °C, case: 85 °C } }
output: { from: 0 V, to: 32 V }
hysteresis: 1 V
`;

/** A vocabulary of our own with the shape of the real one, which lives in other rooms. */
export const vocabulary: Vocabulary = {
  words: { 'limit-style': ['constant-current', 'foldback', 'hiccup'] },
  stepKinds: [
    {
      kind: 'open-circuit',
      summary: 'what open-circuit does',
      parameters: z.strictObject({
        for: quantity('time', 'How long to watch.', { above: 0 }).prefault('5 s'),
      }),
    },
    {
      kind: 'load-ramp',
      summary: 'what load-ramp does',
      parameters: z.strictObject({
        from: quantityOrShare('current', 'The first point.', { least: 0 }).prefault('0 A'),
        to: quantityOrShare('current', 'The last point.', { above: 0 }),
        points: count('How many points.', { least: 2, most: 1000 }).default(21),
        dwell: quantity('time', 'Settling before the first reading.').default(0.5),
        readings: count('How many at a point.', { least: 1, most: 1000 }).default(5),
        direction: choice(['up', 'up-and-down'], 'The way.').default('up'),
      }),
    },
    {
      kind: 'dropout-search',
      summary: 'what dropout-search does',
      parameters: z.strictObject({
        from: quantityOrShare('current', 'Known to hold.'),
        ceiling: quantityOrShare('current', 'Never beyond this.'),
        resolution: quantity('current', 'How fine.').prefault('10 mA'),
        sag: quantity('ratio', 'What counts as dropped.').prefault('5 %'),
      }),
    },
    {
      kind: 'wait',
      summary: 'what wait does',
      parameters: z.strictObject({ for: quantity('time', 'How long.') }),
    },
  ],
  findings: {
    'usable-current': 'current',
    'open-circuit-voltage': 'voltage',
    'load-regulation': 'ratio',
    'limit-style': 'word',
    'earth-relation': 'word',
    'hogging-module': 'word',
    'share-of-*': 'ratio',
  },
};
