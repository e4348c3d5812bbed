import { type Factor, type Finding, findingNamed } from '../../analysis/finding.js';
import { asGiven } from '../../analysis/in-words.js';
import { ratedOf } from '../../analysis/rated.js';
import type { Amperes, Ratio } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { type Fall, fallingChart } from '../chart/falling-chart.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../page/figure.js';
import { allowedAs, amps } from './in-words.js';

const title = 'From the measured limit to the recommendation';

/**
 * How the recommended current comes of the usable one: a bar for what each factor of the derating takes away, with
 * its reason. Undefined where nothing is recommended.
 */
export function deratingFigure(result: Result): Markup | undefined {
  const { findings, header } = result;
  const usable = findingNamed(findings, 'usable-current');
  const recommended = findingNamed(findings, 'recommended-current');
  if (typeof usable?.value !== 'number' || typeof recommended?.value !== 'number') return undefined;
  const plate = ratedOf(header).current;
  const falls = fallsOf(usable, usable.value, recommended, `${allowedAs(result)}, continuously`);
  return figure(
    title,
    fallingChart({
      id: 'derating',
      title,
      description: inWords(falls, plate),
      x: { label: 'Current', dimension: 'current' },
      falls,
      marks: [{ at: plate, label: `nameplate ${asGiven(plate, 'current')}` }],
    }),
    `Each bar is what its step takes away, and the next begins where it ends. The recommendation is the product of ` +
      `all factors and the usable current, rounded down: ${recommended.note}.`,
  );
}

function fallsOf(usable: Finding, limit: Amperes, recommended: Finding, allowed: string): readonly Fall[] {
  let current = limit;
  const steps = recommended.factors.map((factor): Fall => {
    const from = current;
    current = from * factor.factor;
    return {
      name: factor.name,
      says: effect(factor, current),
      because: factor.reason,
      from,
      to: current,
      kind: 'step',
    };
  });
  const least = usable.bound === 'least' ? 'at least ' : '';
  return [
    {
      name: 'usable current',
      says: `${least}${amps(limit)}, measured`,
      because: usable.note,
      from: limit,
      to: limit,
      kind: 'whole',
    },
    ...steps,
    {
      name: allowed,
      says: roundedDown(Number(recommended.value), 'current'),
      because: '',
      from: current,
      to: Number(recommended.value),
      kind: 'whole',
    },
  ];
}

function effect({ factor }: Factor, leaves: Amperes): string {
  return factor === 1 ? '× 1, takes nothing away' : `× ${asWritten(factor)}, leaves ${amps(leaves)}`;
}

/** To four digits, none of them idle. */
function asWritten(factor: Ratio): string {
  return String(Number(factor.toPrecision(4)));
}

function inWords(falls: readonly Fall[], plate: Amperes): string {
  const said = falls.map(({ name, says }) => `${name} ${says}`);
  return `${said.join('; ')}. The nameplate says ${asGiven(plate, 'current')}.`;
}
