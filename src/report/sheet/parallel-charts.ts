import type { Band } from '../../arrangement/build.js';
import type { ParallelBuild } from '../../arrangement/parallel-build.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { type ChartLine, lineChart } from '../chart/line-chart.js';
import type { VerticalMark } from '../chart/marks.js';
import { brief, loadInWords } from '../build/brief.js';
import { estimateInWords } from '../build/estimate-text.js';
import type { Markup } from '../page/markup.js';
import { figure } from '../page/figure.js';
import { isRefused } from './parts.js';

const load = { label: 'Load of the group', dimension: 'current' } as const;
const shaded = 'The shaded band holds it with 95 %.';

/** Each module's part of the load. Near no load the parts say nothing yet. */
export function sharesChart(build: ParallelBuild): Markup {
  const { modules, sharing, atLoad } = build;
  const from = (sharing.loads.at(-1) ?? 0) / 40;
  const kept = [...sharing.loads.keys()].filter((index) => (sharing.loads[index] ?? 0) >= from);
  const ofLoad = (values: readonly number[]): readonly number[] =>
    kept.map((index) => (values[index] ?? NaN) / (sharing.loads[index] ?? NaN));
  const lines = modules.map(({ name }, index): ChartLine => {
    const { best, low, high } = sharing.currents[index] ?? none;
    return {
      name,
      xs: kept.map((each) => sharing.loads[each] ?? NaN),
      ys: ofLoad(best),
      band: { low: ofLoad(low), high: ofLoad(high) },
    };
  });
  const title = 'Share of each module';
  const said = modules.map(({ name }, index) => {
    const share = atLoad.shares[index];
    return share === undefined ? name : `${name} ${estimateInWords(share, 'ratio')}`;
  });
  return figure(
    title,
    lineChart({
      id: 'shares',
      title,
      description: `Each module's part of the load over the load. At ${loadInWords(build.load)}: ${said.join(', ')}.`,
      x: load,
      y: { label: 'Share of the load', dimension: 'ratio', ...shareRange(lines) },
      lines,
      marks: marksOf(build),
    }),
    `Equal shares would be ${brief(1 / Math.max(1, modules.length), 'ratio')} each. ${shaded}`,
  );
}

/** Whole tens of percent round all that is drawn, never below 0 or above 100 %. */
function shareRange(lines: readonly ChartLine[]): { readonly from: number; readonly to: number } {
  const all = lines
    .flatMap(({ band }) => [...(band?.low ?? []), ...(band?.high ?? [])])
    .filter(Number.isFinite);
  return {
    from: Math.max(0, Math.floor(Math.min(1, ...all) * 10 - 0.2) / 10),
    to: Math.min(1, Math.ceil(Math.max(0.1, ...all) * 10 + 0.2) / 10),
  };
}

export function currentsChart(build: ParallelBuild): Markup {
  const { modules, sharing } = build;
  const title = 'Current of each module';
  return figure(
    title,
    lineChart({
      id: 'currents',
      title,
      description: `Each module's current over the load of the group. ${saturation(build)}`,
      x: load,
      y: { label: 'Current of a module', dimension: 'current', from: 0 },
      lines: modules.map(({ name }, index) => lineOf(name, sharing.loads, sharing.currents[index] ?? none)),
      marks: marksOf(build),
    }),
    `${saturation(build)} ${shaded}`,
  );
}

function saturation({ firstToSaturate: { module, load: at } }: ParallelBuild): string {
  return `${module} reaches its limit first, at ${estimateInWords(at, 'current')}.`;
}

export function voltageChart(build: ParallelBuild): Markup {
  const { sharing, atLoad } = build;
  const title = 'Voltage of the group';
  return figure(
    title,
    lineChart({
      id: 'bus',
      title,
      description: `Its voltage over its load: ${estimateInWords(atLoad.busVoltage, 'voltage')} at ${loadInWords(build.load)}.`,
      x: load,
      y: { label: 'Voltage', dimension: 'voltage' },
      lines: [lineOf('group', sharing.loads, sharing.busVoltage)],
      marks: marksOf(build),
    }),
    shaded,
  );
}

function lineOf(name: string, xs: readonly number[], { best, low, high }: Band): ChartLine {
  return { name, xs, ys: best, band: { low, high } };
}

function marksOf(build: ParallelBuild): readonly VerticalMark[] {
  const { recommended, usable, load: at, sharing } = build;
  const most = sharing.loads.at(-1) ?? 0;
  return [
    ...(isRefused(build)
      ? []
      : [{ at: recommended.current, label: `recommended ${roundedDown(recommended.current, 'current')}` }]),
    { at: usable.value, label: `usable ${brief(usable.value, 'current')}` },
    ...(at.from === 'asked-for' ? [{ at: at.current, label: `asked for ${loadInWords(at)}` }] : []),
  ].filter((mark) => mark.at <= most * 1.001);
}

const none: Band = { best: [], low: [], high: [] };
