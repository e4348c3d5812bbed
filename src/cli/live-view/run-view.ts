import { randomBytes } from 'node:crypto';
import { createRequire } from 'node:module';
import { dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Clock } from '../../clock/clock.js';
import { realClock } from '../../clock/real-clock.js';
import { printableLines } from '../../quantity/printable.js';
import type { TerminalOperator } from '../../run/terminal-operator.js';
import type { RunFolder } from '../../record/run-folder.js';
import type { Performed } from '../../run/perform.js';
import type { Operator } from '../../steps/operator.js';
import { readPageFiles } from '../../view/page-files.js';
import { openLiveView } from '../../view/server.js';
import type { LoadedPlan } from '../load-plan.js';
import type { PlanPerformed } from '../perform-plan.js';
import type { RunProgress } from '../progress/run-progress.js';
import type { RunSoFar } from '../progress/run-so-far.js';
import { say } from '../say.js';
import type { StopWishes } from '../stop-signals.js';
import type { Streams } from '../streams.js';
import { whenAborted } from '../when-aborted.js';
import { firstState } from './first-state.js';
import { operatorAtBoth } from './operator-at-both.js';
import { viewProgress } from './view-progress.js';
import { notBegun, viewedEnd, viewedLeft } from './viewed-end.js';

/** A run as pages on this machine see it. */
export interface RunView {
  /** The person who is asked there and at the terminal. */
  operator(terminal: TerminalOperator, yes: boolean): Operator;
  progress(run: RunSoFar): RunProgress;
  /** Told before the record keeps us busy; settled once every page has it, or does not read. Never rejects. */
  left(performed: Performed, folder: RunFolder): Promise<void>;
  ended(performed: PlanPerformed): void;
  failed(error: unknown): void;
  /** Once every page has heard the last of it, or does not listen. Never rejects. */
  close(): Promise<void>;
}

/** As it is installed, whether this is the built program or its source. */
const built = fileURLToPath(new URL('../../../dist/', import.meta.url));

/**
 * Opens the view before anything is asked or touched, and says its address at the terminal.
 * @throws LiveViewError
 */
export async function openRunView(
  loaded: LoadedPlan,
  clock: Clock,
  stop: StopWishes,
  { stderr }: Pick<Streams, 'stderr'>,
): Promise<RunView> {
  // An address that is broken in two is none.
  const tellAddress = (address: string): void => {
    stderr.write(`live view: ${address} (opens once; keep it to yourself)\n`);
  };
  let counted: RunSoFar | undefined;
  const uplot = dirname(createRequire(import.meta.url).resolve('uplot'));
  const view = await openLiveView({
    state: firstState(loaded, { began: clock.wall() }),
    files: readPageFiles(built, uplot),
    clock: realClock,
    times: () => counted && { elapsed: counted.elapsed, remaining: counted.left },
    random: randomBytes,
    stop: () => {
      // A second page, or a wish sent again, is no second wish: what is under way is not broken off by it.
      if (!stop.signal.aborted) stop.wish('stopped in the live view');
    },
    addressed: (address) => {
      stderr.write('\nThe address of the live view was shown again without what it was opened with.\n');
      tellAddress(address);
    },
  });
  tellAddress(view.address);
  whenAborted(stop.signal, () => {
    view.show({ kind: 'stopping' });
  });
  return {
    operator: (terminal, yes) =>
      operatorAtBoth({
        terminal,
        view,
        yes,
        say: (text) => {
          say(stderr, printableLines(text));
        },
      }),
    progress: (run) => {
      counted = run;
      return viewProgress(run, view);
    },
    left: async (performed, folder) => {
      view.show({ kind: 'working-out', left: viewedLeft(performed, folder) });
      await view.flushed();
    },
    ended: (performed) => {
      view.show({ kind: 'ended', ended: viewedEnd(performed) });
    },
    failed: (error) => {
      view.show({ kind: 'ended', ended: notBegun(error) });
    },
    close: () => view.close(),
  };
}
