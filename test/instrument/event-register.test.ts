import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { eventsIn } from '../../src/instrument/event-register.js';

interface Reference {
  readonly error_queue: { readonly classes: readonly { first: number; name: string; esr_bit: number }[] };
  readonly standard_event_status_register: readonly { bit: number; value: number; meaning: string }[];
}
const reference = JSON.parse(
  readFileSync(new URL('../../fixtures/reference/scpi-488.json', import.meta.url), 'utf8'),
) as Reference;

it.each(reference.standard_event_status_register)('bit $bit is $meaning', ({ bit, value }) => {
  const [event, ...others] = eventsIn(value, 'standard');
  expect(others).toEqual([]);
  const classes = reference.error_queue.classes.filter(({ first, esr_bit }) => first < 0 && esr_bit === bit);
  expect(classes.map(({ first }) => first)).toEqual([event?.number]);
  const words = classes[0]?.name.replace(/ event$/, '');
  expect(event?.text.toLowerCase()).toBe(words);
});

it('a register has as many events as bits', () => {
  expect(eventsIn(36, 'standard').map(({ number }) => number)).toEqual([-400, -100]);
  expect(eventsIn(0, 'standard')).toEqual([]);
});

it('the bits of another register go by their weight', () => {
  expect(eventsIn(0x8004, 'other')).toEqual([
    { number: 4, text: 'bit 2 of the register' },
    { number: 32768, text: 'bit 15 of the register' },
  ]);
  expect(eventsIn(256, 'standard')).toEqual([{ number: 256, text: 'bit 8 of the register' }]);
});
