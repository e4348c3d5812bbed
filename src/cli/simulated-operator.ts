import type { OpenedSimulation } from '../simulation/open-simulation.js';
import type { Operator, OperatorRequest } from '../steps/operator.js';

/** The operator who comes with a simulated bench: nothing there can hurt, so cautions are taken as read. */
export function simulatedOperator({ operator }: OpenedSimulation): Operator {
  return {
    present: true,
    acknowledge: () => Promise.resolve('simulated-operator'),
    async ask({ act, answer, name }: OperatorRequest, signal: AbortSignal) {
      signal.throwIfAborted();
      if (act !== undefined) await operator.act(act);
      if (answer === 'done') return 'done';
      return operator.answer(name) ?? `no answer to "${name}" in the simulation`;
    },
  };
}
