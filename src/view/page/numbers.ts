import { leftBy, type ViewState } from '../view-state.js';

/** One of the large figures, as it stands on the page. */
export interface FigureShown {
  readonly name: string;
  readonly unit: string;
  /** How many digits it has as a rule; so wide it is kept. */
  readonly digits: number;
  /** Digits, or why there are none. */
  readonly value:
    { readonly kind: 'number'; readonly text: string } | { readonly kind: 'none'; readonly words: string };
  /** What the load is set to, where this is what it sets. */
  readonly set?: string;
}

/** As many decimals as make `digits` digits of the nameplate's value, so that the width stays as values come and go. */
export function decimalsFor(rated: number, digits: number): number {
  const before = Math.max(1, Math.floor(Math.log10(Math.max(rated, 1e-9))) + 1);
  return Math.min(4, Math.max(0, digits - before));
}

/** A number for the eye: always as many decimals, a minus that is one, and never minus nought. */
export function fixed(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? `−${text}` : text;
}

/** The four large figures. Power is what voltage and current make together. */
export function figuresShown(
  state: Pick<ViewState, 'run' | 'figures' | 'workingOut' | 'ended'>,
): readonly FigureShown[] {
  const { run, figures } = state;
  const { voltage, current, temperature, setCurrent } = figures;
  const unread = leftBy(state) === undefined ? 'not read yet' : 'not read';
  const nothing = voltage === undefined && current === undefined && temperature === undefined;
  const shown = (
    value: number | null | undefined,
    decimals: number,
    absent: string,
  ): FigureShown['value'] => {
    if (value === null) return { kind: 'none', words: 'no reading' };
    if (value === undefined) return { kind: 'none', words: nothing ? unread : absent };
    return { kind: 'number', text: fixed(value, decimals) };
  };
  const { volts, amperes, watts } = decimalsOf(run.rated);
  return [
    { name: 'Voltage', unit: 'V', digits: 5, value: shown(voltage, volts, 'not read here') },
    {
      name: 'Current',
      unit: 'A',
      digits: 4,
      value: shown(current, amperes, 'not read here'),
      ...(setCurrent !== undefined && { set: `set to ${fixed(setCurrent, amperes)} A` }),
    },
    { name: 'Power', unit: 'W', digits: 4, value: shown(product(voltage, current), watts, 'not known here') },
    { name: 'Temperature', unit: '°C', digits: 3, value: shown(temperature, 1, 'not measured') },
  ];
}

export function decimalsOf({ voltage, current }: ViewState['run']['rated']): {
  readonly volts: number;
  readonly amperes: number;
  readonly watts: number;
} {
  return {
    volts: decimalsFor(voltage, 5),
    amperes: decimalsFor(current, 4),
    watts: decimalsFor(voltage * current, 4),
  };
}

function product(
  one: number | null | undefined,
  other: number | null | undefined,
): number | null | undefined {
  if (one === undefined || other === undefined) return undefined;
  return one === null || other === null ? null : one * other;
}
