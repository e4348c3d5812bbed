import type { ScpiError } from './scpi-error.js';

/**
 * What the bits of the standard event status register stand for, from bit 0 (IEEE 488.2, 11.5.1), with the
 * numbers and words that SCPI-1999 gives the same events in its queue (volume 2, 21.8; in part from memory).
 */
const standardEvents: readonly ScpiError[] = [
  { number: -800, text: 'Operation complete' },
  { number: -700, text: 'Request control' },
  { number: -400, text: 'Query error' },
  { number: -300, text: 'Device-specific error' },
  { number: -200, text: 'Execution error' },
  { number: -100, text: 'Command error' },
  { number: -600, text: 'User request' },
  { number: -500, text: 'Power on' },
];
const mostBits = 16;

/**
 * The events that the bits of a register stand for. What those of another register than the standard one mean
 * its instrument alone knows: they go by their weight.
 */
export function eventsIn(register: number, which: 'standard' | 'other'): ScpiError[] {
  const set = Array.from({ length: mostBits }, (_, bit) => bit).filter(
    (bit) => (register & (1 << bit)) !== 0,
  );
  return set.map(
    (bit) =>
      (which === 'standard' ? standardEvents[bit] : undefined) ?? {
        number: 1 << bit,
        text: `bit ${bit} of the register`,
      },
  );
}
