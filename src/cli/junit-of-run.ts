import { messageOf } from '../errors/message-of.js';
import { RailproofError } from '../errors/railproof-error.js';
import { runSuite } from '../report/junit/run-suite.js';
import type { Suite } from '../report/junit/suite.js';
import { unfinishedSuite } from '../report/junit/unfinished-suite.js';
import type { Plan } from '../run/plan.js';
import type { KeepJunit } from './junit-written.js';
import type { PlanPerformed } from './perform-plan.js';

/**
 * The JUnit report that is kept of a run; none where none is wanted. It is there before anything is energised, so
 * that the place is known to be writable, and holds an error until the run has ended.
 */
export interface JunitOfRun {
  /** Never fails. */
  notBegun(error: unknown): Promise<void>;
  /** Why it could not be kept, where it could not: that must not hide how the bench was left. */
  end(performed: PlanPerformed): Promise<RailproofError | undefined>;
}

/** @throws FileNotKeptError */
export async function junitOfRun(keep: KeepJunit, plan: Plan, wall: () => Date): Promise<JunitOfRun> {
  const what = { name: 'a run', procedure: plan.procedure.name, modules: plan.underTest.name };
  await keep(() =>
    unfinishedSuite(what, 'not-ended', 'the run has not ended, or ended without a word', wall()),
  );
  return {
    async notBegun(error) {
      // Why nothing was begun is what must be told; what is kept still says that nothing ended.
      await keep(() => unfinishedSuite(what, 'not-begun', messageOf(error), wall())).catch(() => undefined);
    },
    async end({ understood, folder }) {
      const suite = (): Suite =>
        understood.kind === 'result'
          ? runSuite(understood.result)
          : unfinishedSuite({ ...what, name: folder.name }, 'not-read', messageOf(understood.error), wall());
      try {
        await keep(suite);
        return undefined;
      } catch (error) {
        if (error instanceof RailproofError) return error;
        throw error;
      }
    },
  };
}
