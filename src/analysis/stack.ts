import { touchable } from '../circuit/touchable.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, inWords, measured } from './finding.js';
import { groupCurrent } from './group-current.js';
import { amps } from './in-words.js';
import { type StackLook, sumBudget, sumUpTo } from './module-voltages.js';
import { isComplete } from './place-looks.js';
import { promised, promisedErrors } from './promised-errors.js';
import { stackSeen } from './stack-seen.js';
import { howTheStackFailed, weakestModule } from './weakest-module.js';

/**
 * How a series string stands: `stack-voltage` with no load, `float-voltage-of-<module>` of each 0 V above
 * that of the string, `weakest-module`, and `group-current`, here of the string. The modules' voltages
 * must add up to the output's (Kirchhoff); where they don't, nothing that rests on them is given.
 */
export function stackFindings(
  evidence: Evidence,
  found: {
    readonly dropout: Finding | undefined;
    readonly held: readonly CurvePoint[];
    readonly openCircuit: Finding | undefined;
  },
): readonly Finding[] {
  const { header } = evidence;
  const seen = stackSeen(evidence);
  if (seen === undefined) return [];
  const { looks, wrong } = seen;
  const idle = lightest(looks.filter((look) => isComplete(look, header)));
  const step = looks[0]?.step ?? null;
  if (wrong !== undefined) {
    const { look, sum } = wrong;
    const note = `the modules' voltages add up to ${volts(sum)} where the output gives ${volts(look.output)} at ${amps(look.current)}: usually probes that are not across the module they should be across, a meter in another range or mode, or a joint in between`;
    return [
      ...present(groupCurrent(evidence, found, '')),
      ...stackVoltage(header, idle, found.openCircuit, ''),
      inWords('weakest-module', 'undetermined', { step, note }),
    ];
  }
  return [
    ...present(groupCurrent(evidence, found, howTheStackFailed(header, looks))),
    ...stackVoltage(header, idle, found.openCircuit, sumInWords(idle, header)),
    ...weakestModule(header, looks),
    ...floatVoltages(header, idle),
  ];
}

/** The look with the least load: with all plugged in and the load off where there is one. */
function lightest(looks: readonly StackLook[]): StackLook | undefined {
  return looks
    .filter(({ kind, outcome }) => kind === 'together' || (kind === 'climb' && outcome === 'held'))
    .sort((one, other) => one.current - other.current || one.step - other.step)
    .at(0);
}

/** From the output itself: what an open-circuit step measured, else the look with the load off. */
function stackVoltage(
  header: RunHeader,
  idle: StackLook | undefined,
  openCircuit: Finding | undefined,
  note: string,
): readonly Finding[] {
  if (openCircuit !== undefined) {
    const notes = [note, openCircuit.note].filter((part) => part !== '').join('; ');
    return [{ ...openCircuit, name: 'stack-voltage', note: notes }];
  }
  if (idle === undefined || idle.current > 0) return [];
  const errors = promisedErrors(header, idle.outputBy, 'voltage');
  return [
    measured(
      'stack-voltage',
      'voltage',
      idle.output,
      [
        { name: 'scatter of the readings', kind: 'A', ...idle.outputScatter },
        promised(`${errors.of}, gain`, errors.gain * idle.output),
        promised(`${errors.of}, offset`, errors.offset),
        promised(`${errors.of}, resolution`, errors.resolution),
      ],
      { step: idle.step, note },
    ),
  ];
}

function sumInWords(idle: StackLook | undefined, header: RunHeader): string {
  if (idle === undefined) return '';
  const each = idle.modules.map(({ module, volts: own }) => `${module} ${volts(own)}`).join(', ');
  return `the modules add up to ${volts(sumUpTo(idle, header.modules.length))} (${each})`;
}

/** Each 0 V stands on the modules below it. */
function floatVoltages(header: RunHeader, idle: StackLook | undefined): readonly Finding[] {
  if (idle === undefined) return [];
  return header.modules.map((module, below) => {
    const value = sumUpTo(idle, below);
    const name = `float-voltage-of-${module.name}`;
    // The lowest is where all others are counted from: 0 V by definition.
    const finding: Finding =
      below === 0
        ? { ...inWords(name, '', { step: idle.step }), value, dimension: 'voltage' }
        : measured(name, 'voltage', value, sumBudget(header, idle, { upTo: below, lessOutput: false }), {
            step: idle.step,
          });
    const top = value + (idle.modules[below]?.volts ?? 0);
    return { ...finding, note: floatNote(module, { finding, top, current: idle.current }) };
  });
}

function floatNote(
  { name, outputIsolation }: RunHeader['modules'][number],
  { finding, top, current }: { readonly finding: Finding; readonly top: Volts; readonly current: number },
): string {
  const value = Number(finding.value);
  const high = finding.interval?.[1] ?? value;
  const notes: string[] = [];
  if (value === 0) notes.push('the lowest: its 0 V is that of the string');
  else notes.push(`its output then stands at ${volts(top)}`);
  if (current > 0) notes.push(`at ${amps(current)}, the least load that was looked at`);
  if (Math.max(high, top) > touchable) {
    notes.push(`beyond ${touchable} V DC, which is not safe to touch (ES1, IEC 62368-1)`);
  }
  if (outputIsolation === 'unknown') {
    if (value > 0) notes.push('what its output withstands to earth is unknown: find out first');
  } else if (Math.max(high, top) > outputIsolation) {
    notes.push(
      `MORE THAN ITS OUTPUT WITHSTANDS to earth (${formatQuantity(outputIsolation, 'voltage')}): ${name} may not stand there`,
    );
  } else if (value > 0) {
    notes.push(`its output withstands ${formatQuantity(outputIsolation, 'voltage')} to earth`);
  }
  return notes.join('; ');
}

function volts(value: Volts): string {
  return formatQuantity(value, 'voltage', { significant: 4 });
}

function present(finding: Finding | undefined): readonly Finding[] {
  return finding === undefined ? [] : [finding];
}
