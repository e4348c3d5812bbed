/**
 * What the 0 V rail of each module of a stack floats at above the stack's own 0 V, in volts: the sum of what
 * those below it add.
 * @param added what each adds, the lowest first: its own voltage less what is lost in series with it.
 * @example railVoltages([12.3, 12.2, 12.1]); // => [0, 12.3, 24.5]
 */
export function railVoltages(added: readonly number[]): readonly number[] {
  let below = 0;
  return added.map((volts) => {
    const rail = below;
    below += volts;
    return rail;
  });
}
