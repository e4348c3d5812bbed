/** What a query is answered with, before it is put in a form (IEEE 488.2, 8.7; SCPI-99, 7). */
export type Response =
  /** With its unit behind it where the instrument is of a style older than SCPI: `12.031V`. */
  | { readonly kind: 'number'; readonly value: number; readonly unit?: string }
  /** Always NR1. */
  | { readonly kind: 'whole'; readonly value: number }
  | { readonly kind: 'boolean'; readonly value: boolean }
  | { readonly kind: 'word'; readonly printed: string }
  | { readonly kind: 'string'; readonly text: string }
  /** A function by its name in quotes, perhaps with range and resolution: `"VOLT:DC +1.0E+01,+1.0E-05"`. */
  | { readonly kind: 'function'; readonly printed: string; readonly with?: readonly number[] }
  | { readonly kind: 'channels'; readonly channels: readonly number[] }
  | { readonly kind: 'list'; readonly of: readonly Response[] }
  /** As it stands in the standard. */
  | { readonly kind: 'verbatim'; readonly text: string }
  /** Bytes up to the end of the message: nothing may be asked after it in the same one. */
  | { readonly kind: 'arbitrary'; readonly text: string };

/**
 * How one instrument writes its replies. The standard's own forms, and those that instruments make of them:
 * `strict` is what IEEE 488.2 asks a talker for, the others are what a listener should bear.
 */
export interface ReplyForm {
  /** How numbers that are measured are written. */
  readonly numbers: 'NR1' | 'NR2' | 'NR3';
  /** Digits behind the point, of NR2 and NR3. */
  readonly digits: number;
  readonly plus: boolean;
  /** `E+2` or `E+02`. */
  readonly exponentDigits: 1 | 2 | 3;
  /** `1.5E2`: the sign of the exponent is left out where it is a plus. */
  readonly bareExponent: boolean;
  readonly letters: 'upper' | 'lower';
  readonly booleans: 'digit' | 'word';
  readonly words: 'short' | 'long';
  /** `"VOLT"` or `"VOLT:DC"`. */
  readonly defaultNodes: 'left-out' | 'written';
  /** Between `(@` and the first channel, around a number: nothing, or a space. */
  readonly space: '' | ' ';
  /** `(@101)` as it is, or as a block of definite length. */
  readonly channels: 'bare' | 'block';
}

export const strict: ReplyForm = {
  numbers: 'NR3',
  digits: 6,
  plus: true,
  exponentDigits: 2,
  bareExponent: false,
  letters: 'upper',
  booleans: 'digit',
  words: 'short',
  defaultNodes: 'left-out',
  space: '',
  channels: 'bare',
};

/** A response as its instrument writes it. */
export function written(response: Response, form: ReplyForm): string {
  switch (response.kind) {
    case 'number':
      return form.space + inCase(numberText(response.value, form) + form.space + (response.unit ?? ''), form);
    case 'whole':
      return signed(response.value.toFixed(0), form);
    case 'boolean':
      if (form.booleans === 'word') return inCase(response.value ? 'ON' : 'OFF', form);
      return signed(response.value ? '1' : '0', form);
    case 'word':
      return inCase(wordText(response.printed, form), form);
    case 'string':
      return `"${response.text.replaceAll('"', '""')}"`;
    case 'function': {
      const numbers = (response.with ?? []).map((each) => numberText(each, form)).join(',');
      const text = wordText(response.printed, form) + (numbers === '' ? '' : ` ${numbers}`);
      return `"${inCase(text, form)}"`;
    }
    case 'channels':
      return channelsText(response.channels, form);
    case 'list':
      return response.of.map((each) => written(each, form)).join(',');
    case 'verbatim':
    case 'arbitrary':
      return response.text;
  }
}

/** SCPI-99, 7.2.1: what is beyond every range, and what is no number. */
const beyond = 9.9e37;
const notANumber = 9.91e37;

function numberText(value: number, form: ReplyForm): string {
  if (Number.isNaN(value)) return floating(notANumber, form);
  if (!Number.isFinite(value)) return floating(Math.sign(value) * beyond, form);
  switch (form.numbers) {
    case 'NR1':
      return signed(value.toFixed(0), form);
    case 'NR2':
      return signed(value.toFixed(Math.max(1, form.digits)), form);
    case 'NR3':
      return floating(value, form);
  }
}

function floating(value: number, form: ReplyForm): string {
  const [mantissa = '', exponent = ''] = value.toExponential(Math.max(1, form.digits)).split('e');
  const digits = exponent.slice(1).padStart(form.exponentDigits, '0');
  const sign = exponent.startsWith('-') ? '-' : form.bareExponent ? '' : '+';
  return `${signed(mantissa, form)}E${sign}${digits}`;
}

function signed(digits: string, { plus }: ReplyForm): string {
  return plus && !digits.startsWith('-') ? `+${digits}` : digits;
}

function wordText(printed: string, { words, defaultNodes }: ReplyForm): string {
  const nodes = defaultNodes === 'written' ? printed.replace(/[[\]]/g, '') : printed.replace(/\[.*?\]/g, '');
  return words === 'long' ? nodes.toUpperCase() : nodes.replace(/[a-z]/g, '');
}

function channelsText(channels: readonly number[], { space, channels: how }: ReplyForm): string {
  const list = `(@${space}${channels.join(',')}${space})`;
  if (how === 'bare') return list;
  const length = String(list.length);
  return `#${length.length}${length}${list}`;
}

function inCase(text: string, { letters }: ReplyForm): string {
  return letters === 'upper' ? text : text.toLowerCase();
}
