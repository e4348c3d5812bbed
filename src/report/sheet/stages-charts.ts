import type { Guaranteed, StagedBuild } from '../../arrangement/staged-build.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief } from '../build/brief.js';
import { setBy, setByInShort } from '../build/set-by.js';
import { heatMap } from '../chart/heat-map.js';
import { type ChartLine, lineChart } from '../chart/line-chart.js';
import type { VerticalMark } from '../chart/marks.js';
import type { Ribbon } from '../chart/ribbons.js';
import type { Markup } from '../page/markup.js';
import { figure } from '../page/figure.js';
import { stretchesOf } from '../build/stretches.js';

const output = { label: 'Output', dimension: 'voltage' } as const;

/** What it gives at least at each output, which arrangement gives it, and what sets it. */
export function guaranteedChart(build: StagedBuild): Markup {
  const { guaranteed } = build;
  const title = 'Guaranteed current';
  const stretches = stretchesOf(guaranteed, ({ rising }) => rising);
  return figure(
    title,
    lineChart({
      id: 'guaranteed',
      title,
      description: stretches
        .map(
          ({ from, to, least, of }) =>
            `${brief(from, 'voltage')} to ${brief(to, 'voltage')}: at least ${roundedDown(least, 'current')} by ${of.arrangement}, set by ${setBy[of.setBy]}`,
        )
        .join('; ')
        .concat('.'),
      x: output,
      y: { label: 'Current', dimension: 'current', from: 0 },
      lines: [
        lineOf('output rising', build, ({ rising }) => rising),
        lineOf('output falling', build, ({ falling }) => falling),
      ],
      marks: switchMarks(build),
      ribbons: [arrangementRibbon(build), setByRibbon(build)],
    }),
    'The strips are for a rising output.',
  );
}

/** Where the arrangement changes the line jumps. */
function lineOf(
  name: string,
  { guaranteed }: StagedBuild,
  way: (point: StagedBuild['guaranteed'][number]) => Guaranteed,
): ChartLine {
  return {
    name,
    xs: guaranteed.map((point) => point.output),
    ys: guaranteed.map((point) => way(point).current),
  };
}

function setByRibbon({ guaranteed }: StagedBuild): Ribbon {
  return ribbonOf('Set by', guaranteed, (rising) => setByInShort[rising.setBy]);
}

function arrangementRibbon({ guaranteed, arrangements }: StagedBuild): Ribbon {
  return ribbonOf('Arrangement', guaranteed, ({ arrangement }) => ({
    word: arrangement,
    sign: String(arrangements.findIndex(({ name }) => name === arrangement) + 1),
  }));
}

/** Neighbouring stretches that say the same are one; each reaches to where the next begins. */
function ribbonOf(
  label: string,
  guaranteed: StagedBuild['guaranteed'],
  saying: (rising: Guaranteed) => { readonly word: string; readonly sign: string },
): Ribbon {
  const starts = guaranteed
    .map(({ output: from, rising }) => ({ from, ...saying(rising) }))
    .filter(({ word }, index, all) => all[index - 1]?.word !== word);
  const end = guaranteed.at(-1)?.output ?? 0;
  return {
    label,
    stretches: starts.map((start, index) => ({ ...start, to: starts[index + 1]?.from ?? end })),
  };
}

function switchMarks({ switchOvers }: StagedBuild): readonly VerticalMark[] {
  return switchOvers.flatMap(({ up, down }) => [
    { at: down, label: `back ${brief(down, 'voltage')}` },
    { at: up, label: `up ${brief(up, 'voltage')}` },
  ]);
}

export function dissipationMap(build: StagedBuild): Markup {
  const { map, mostDissipation } = build;
  const title = 'Heat over output and current';
  const most = Math.max(0, ...map.watts.flatMap((column) => column.map((value) => value ?? 0)));
  return figure(
    title,
    heatMap({
      id: 'heat',
      title,
      description: `What the linear stage turns into heat at each output and current that is guaranteed: ${brief(most, 'power')} at most, of ${brief(mostDissipation, 'power')} allowed.`,
      x: { ...output, values: map.outputs },
      y: { label: 'Current', dimension: 'current', values: map.currents },
      dimension: 'power',
      cells: map.watts,
      marks: build.switchOvers.map(({ up }) => ({ at: up, label: `up ${brief(up, 'voltage')}` })),
    }),
    `At worst, output rising. It may turn ${brief(mostDissipation, 'power')} into heat; numbers on the contours are watts. Above the thick line no current is guaranteed.`,
  );
}
