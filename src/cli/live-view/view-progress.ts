import { PointCollector } from '../../analysis/point-evidence.js';
import { cutText } from '../../quantity/cut-text.js';
import type { JournalEvent, PointEnded } from '../../record/journal-event.js';
import type { RunningMoments } from '../../statistics/running-moments.js';
import type { LiveView } from '../../view/server.js';
import type { Figures, ViewedPoint } from '../../view/view-state.js';
import type { RunProgress } from '../progress/run-progress.js';
import type { RunSoFar } from '../progress/run-so-far.js';

/** An instrument may say more of itself than anybody reads. */
const longestNotice = 1000;

/** Tells a live view what goes on in a run that is counted already. */
export function viewProgress(run: RunSoFar, { show, state }: Pick<LiveView, 'show' | 'state'>): RunProgress {
  const { bench } = run.plan;
  const texts = new Map(state.cautions.map(({ name, text }) => [name, text]));
  let point: PointCollector | undefined;
  const times = () => ({ elapsed: run.elapsed, remaining: run.left });

  const recorded = (event: JournalEvent): void => {
    if (event.event === 'input') {
      // One of which the load did not say that it is off counts as on.
      show({ kind: 'input', input: event.confirmed ? event.state : 'on' });
    } else if (event.event === 'caution') {
      const { name, by } = event;
      show({ kind: 'caution', caution: { name, text: texts.get(name) ?? '', by } });
    } else if (event.event === 'point-began') {
      point = new PointCollector(bench, event, run.elapsed);
    } else if (event.event === 'reading') {
      point?.add(event);
    } else if (event.event === 'point-ended') {
      if (point !== undefined) show({ kind: 'point', point: viewedPoint(point, event) });
      point = undefined;
    }
  };

  return {
    stepBegan(step) {
      show({ kind: 'step', step, ...times() });
    },
    progress() {
      show({ kind: 'figures', figures: figuresOf(run.figures), ...times() });
    },
    recorded,
    noticed(text) {
      show({ kind: 'notice', notice: { t: run.elapsed, text: cutText(text, longestNotice) } });
    },
    end() {
      // What it came to is told once it is worked out.
    },
  };
}

function viewedPoint({ point }: PointCollector, { step, outcome }: PointEnded): ViewedPoint {
  const { phase, set, t, moduleVoltage, current, temperature } = point;
  return {
    ...{ step, phase, set, t, outcome },
    voltage: meanOf(moduleVoltage),
    current: meanOf(current),
    temperature: meanOf(temperature),
  };
}

function meanOf(moments: RunningMoments): number | null {
  return moments.count === 0 ? null : moments.mean;
}

/** An instrument that has no value says so by one that is no number. */
function figuresOf({ setCurrent, voltage, current, temperature, note }: RunSoFar['figures']): Figures {
  const read = { voltage, current, temperature };
  return {
    ...(setCurrent === undefined ? {} : { setCurrent }),
    ...Object.fromEntries(
      Object.entries(read).flatMap(([name, value]) =>
        value === undefined ? [] : [[name, Number.isFinite(value) ? value : null]],
      ),
    ),
    ...(note === undefined ? {} : { note }),
  };
}
