import { formatQuantity } from '../quantity/format-quantity.js';
import type { Answered, InputChanged, Recovery } from '../record/journal-event.js';

/** `ambient: 23 °C`; a thing done is only named. */
export function answerInWords({ name, answer, value, dimension }: Answered): string {
  if (value === undefined || dimension === undefined) return `${name}: ${answer}`;
  const read = formatQuantity(value, dimension);
  return read === answer ? `${name}: ${answer}` : `${name}: ${answer}, taken as ${read}`;
}

export function inputInWords({ state, confirmed }: InputChanged): string {
  if (state === 'on') return confirmed ? 'load on, read back' : 'load told to go on';
  return confirmed ? 'load off, read back' : 'load told to go off; that it did was not read back';
}

export function recoveryInWords({ outcome, after, within, untimed }: Recovery): string {
  const words = {
    'came-back': 'the output came back by itself',
    'came-back-after-cycling': 'the output came back after the input was cycled',
    'stayed-off': 'the output did not come back in time',
  }[outcome];
  if (outcome === 'stayed-off') return `${words}, ${said(within)}`;
  return untimed === true
    ? `${words}; when was not seen`
    : `${words}, ${said(after)} to ${said(within)} later`;
}

function said(seconds: number): string {
  return formatQuantity(Number(seconds.toPrecision(3)), 'time');
}
