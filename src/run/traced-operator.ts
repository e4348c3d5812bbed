import { messageOf } from '../errors/message-of.js';
import type { EventClock } from '../clock/event-clock.js';
import type { Operator } from '../steps/operator.js';
import type { RecordedAnswer } from './answers-record.js';

/** The same person, and each answer noted with its time; the clock moves to when it was given. */
export function tracedOperator(
  operator: Operator,
  clock: EventClock,
  note: (answer: RecordedAnswer) => void,
): Operator {
  return {
    present: operator.present,
    async acknowledge(caution, text, signal) {
      const by = await operator.acknowledge(caution, text, signal);
      note({ t: clock.happens(), acknowledged: caution, by });
      return by;
    },
    async ask(request, signal) {
      try {
        const answered = await operator.ask(request, signal);
        note({ t: clock.happens(), asked: request.name, answered });
        return answered;
      } catch (error) {
        const stopped = messageOf(error);
        note({ t: clock.happens(), asked: request.name, stopped });
        throw error;
      }
    },
  };
}
