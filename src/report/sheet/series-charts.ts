import type { SeriesBuild } from '../../arrangement/series-build.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { brief, loadInWords } from '../build/brief.js';
import { estimateInWords } from '../build/estimate-text.js';
import { barChart } from '../chart/bar-chart.js';
import { lineChart } from '../chart/line-chart.js';
import type { Markup } from '../page/markup.js';
import { figure } from '../page/figure.js';
import { isRefused } from './parts.js';

/** Beyond which a direct voltage is no longer safe to touch (ES1 of IEC 62368-1). */
const touchable = 60;

export function curveChart(build: SeriesBuild): Markup {
  const { curve, recommended, usable, openVoltage, voltageAtLoad, load } = build;
  const most = curve.currents.at(-1) ?? 0;
  const title = 'Voltage of the string';
  return figure(
    title,
    lineChart({
      id: 'curve',
      title,
      description: `${estimateInWords(openVoltage, 'voltage')} at no load, ${estimateInWords(voltageAtLoad, 'voltage')} at ${loadInWords(load)}.`,
      x: { label: 'Load of the string', dimension: 'current' },
      y: { label: 'Voltage', dimension: 'voltage' },
      lines: [
        {
          name: 'string',
          xs: curve.currents,
          ys: curve.voltage.best,
          band: { low: curve.voltage.low, high: curve.voltage.high },
        },
      ],
      marks: [
        ...(isRefused(build)
          ? []
          : [
              {
                at: recommended.current,
                label: `recommended ${roundedDown(recommended.current, 'current')}`,
              },
            ]),
        { at: usable.value, label: `usable ${brief(usable.value, 'current')}` },
      ].filter(({ at }) => at <= most * 1.001),
    }),
    'The shaded band holds it with 95 %.',
  );
}

/** Each output from its 0 V to its plus, above earth. */
export function railsChart({ rails, openVoltage }: SeriesBuild): Markup {
  const title = 'Rails above earth';
  const isNear = openVoltage.high > touchable / 2;
  return figure(
    title,
    barChart({
      id: 'rails',
      title,
      description: rails
        .map(
          ({ module, float, top }) =>
            `${module} from ${brief(float.value, 'voltage')} to ${brief(top.value, 'voltage')}`,
        )
        .join(', ')
        .concat('.'),
      x: { label: 'Above the 0 V of the string', dimension: 'voltage' },
      // The uppermost is drawn at the top, as it stands in the string.
      bars: [...rails].reverse().map(({ module, float, top }) => ({
        name: module,
        says: `${brief(float.value, 'voltage')} to ${brief(top.value, 'voltage')}`,
        from: float.value,
        to: top.value,
      })),
      marks: isNear ? [{ at: touchable, label: '60 V: end of ES1' }] : [],
    }),
  );
}
