import type { Ratio } from '../quantity/quantity.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, inWords } from './finding.js';
import { recommendedBallast } from './group-ballast.js';
import { groupCurrent } from './group-current.js';
import { howItFailed } from './group-failure.js';
import { hoggingFinding } from './hogging.js';
import { moduleLines } from './module-lines.js';
import { type OwnLabels, smallestLabel, withinOwnLabels } from './own-labels.js';
import { imbalanceFinding, shareFindings } from './shares.js';
import { sharingSeen } from './sharing-seen.js';

/** What the step takes when a procedure says nothing; a record made elsewhere may hold neither. */
const usual = { imbalance: 0.1, tolerance: 0.01 };

/**
 * How a parallel group shares its load: `group-current`, `hogging-module`, `recommended-ballast`,
 * `imbalance` and `share-of-<module>`, the last two at the highest point that was held. Nothing that rests
 * on the modules' currents is given unless these add up to the load's (Kirchhoff); where a ballast is what
 * is wrong, `ballast-of-<module>` names it. `ownLabels` is what a recommendation must mind of all that.
 */
export function sharingFindings(
  evidence: Evidence,
  found: {
    readonly dropout: Finding | undefined;
    readonly held: readonly CurvePoint[];
    /** The `limit-style` of the whole, where it was told. */
    readonly style: string | undefined;
  },
): { readonly findings: readonly Finding[]; readonly ownLabels?: OwnLabels } {
  const { header } = evidence;
  const seen = sharingSeen(evidence);
  if (seen === undefined) return { findings: [] };
  const { looks, kirchhoff, held, saturated } = seen;
  const highest = held.at(-1);
  const step = looks[0]?.step ?? null;
  if (kirchhoff.kind === 'wrong-ballasts' || kirchhoff.kind === 'unexplained') {
    return {
      findings: [
        ...present(groupCurrent(evidence, found, '')),
        inWords('hogging-module', 'undetermined', { step, note: kirchhoff.note }),
        ...(kirchhoff.kind === 'wrong-ballasts' ? kirchhoff.ballasts : []),
      ],
      ownLabels: smallestLabel(header),
    };
  }
  if (header.modules.length < 2) {
    const note = 'the record has one module only, which shares with none';
    return {
      findings: [
        ...present(groupCurrent(evidence, found, '')),
        inWords('hogging-module', 'undetermined', { step, note }),
      ],
      ownLabels: smallestLabel(header),
    };
  }
  if (highest === undefined) return { findings: present(groupCurrent(evidence, found, '')) };
  const { imbalance: setting, tolerance } = settingsOf(evidence, highest.step);
  const lines = moduleLines(header, looks, saturated);
  return {
    findings: [
      ...present(groupCurrent(evidence, found, howItFailed(header, { ...found, held, looks, saturated }))),
      ...present(hoggingFinding(header, { held, looks, lines, saturated, setting })),
      recommendedBallast(header, lines, {
        load: highest.total,
        imbalance: setting,
        tolerance,
        step: highest.step,
      }),
      imbalanceFinding(header, highest, { setting, curve: held }),
      ...shareFindings(header, highest, held),
    ],
    ownLabels: withinOwnLabels(header, held),
  };
}

function settingsOf({ steps }: Evidence, step: number): Record<'imbalance' | 'tolerance', Ratio> {
  const settings = steps.find((one) => one.step === step)?.settings ?? {};
  const { imbalance, tolerance } = settings;
  return {
    imbalance: typeof imbalance === 'number' && imbalance > 0 ? imbalance : usual.imbalance,
    tolerance: typeof tolerance === 'number' && tolerance >= 0 && tolerance < 1 ? tolerance : usual.tolerance,
  };
}

function present(finding: Finding | undefined): readonly Finding[] {
  return finding === undefined ? [] : [finding];
}
