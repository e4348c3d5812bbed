/** What a label says, in volts and amperes. */
export interface Nameplate {
  readonly voltage: number;
  readonly current: number;
}

/**
 * The nameplate of what is connected. Side by side the currents add up, and no voltage above the smallest is
 * promised by all; one upon the other the voltages add up, and the weakest sets the current (Kirchhoff).
 */
export function nameplateOf(
  circuit: 'single' | 'parallel' | 'series',
  labels: readonly [Nameplate, ...Nameplate[]],
): Nameplate {
  const voltages = labels.map(({ voltage }) => voltage);
  const currents = labels.map(({ current }) => current);
  switch (circuit) {
    case 'single':
      return labels[0];
    case 'parallel':
      return { voltage: Math.min(...voltages), current: sum(currents) };
    case 'series':
      return { voltage: sum(voltages), current: Math.min(...currents) };
  }
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
