import { describe, expect, it } from 'vitest';
import { EventClock } from '../../src/clock/event-clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { answerLine, answersHeader, readAnswers, type RecordedAnswer } from '../../src/run/answers-record.js';
import { replayedOperator } from '../../src/run/replayed-operator.js';
import { StoppedByOperator } from '../../src/run/stopped.js';
import { tracedOperator } from '../../src/run/traced-operator.js';
import type { Operator } from '../../src/steps/operator.js';

const { signal } = new AbortController();
const request = { name: 'case', text: 'How warm is the case?', answer: 'temperature' } as const;

/** Somebody who takes 40 s over each answer, and has had enough at the second. */
function somebody(clock: VirtualClock): Operator {
  let asked = 0;
  return {
    present: true,
    acknowledge: async () => {
      await clock.sleep(40);
      return 'operator';
    },
    ask: async () => {
      await clock.sleep(40);
      if (++asked === 2) throw new StoppedByOperator('stopped with Ctrl-C');
      return '41 °C';
    },
  };
}

async function work(operator: Operator, now: () => number): Promise<readonly unknown[]> {
  const seen: unknown[] = [];
  seen.push(await operator.acknowledge('mains', 'Mains.', signal), now());
  seen.push(await operator.ask(request, signal), now());
  const second = await operator.ask(request, signal).catch((error: unknown) => error);
  expect(second).toBeInstanceOf(StoppedByOperator);
  seen.push(String(second), now());
  return seen;
}

describe('the person of a recorded run', () => {
  it('answers as then, takes as long over it, and has had enough at the same question', async () => {
    const base = new VirtualClock(new Date(0));
    const time = new EventClock(base);
    let text = answersHeader;
    const traced = tracedOperator(somebody(base), time, (answer) => {
      text += answerLine(answer);
    });
    const then = await work(traced, () => time.now());
    expect(then).toEqual(['operator', 40, '41 °C', 80, 'StoppedByOperator: stopped with Ctrl-C', 120]);

    const answers = readAnswers(text) as readonly RecordedAnswer[];
    const clock = new VirtualClock(new Date(0));
    const again = replayedOperator('operator.jsonl', answers, (moment) => {
      clock.reach(moment);
    });
    expect(await work(again, () => clock.now())).toEqual(then);
    await expect(again.ask(request, signal)).rejects.toMatchObject({
      code: 'ANSWERS_MISMATCH',
      message: "operator.jsonl:5: the recording has come to its end, and now 'case' is asked",
    });
  });

  it('does nothing once the run is to end', async () => {
    const operator = replayedOperator('a', [{ t: 1, asked: 'case', answered: 'done' }], () => undefined);
    const aborted = AbortSignal.abort(new StoppedByOperator('enough'));
    await expect(operator.ask(request, aborted)).rejects.toThrow('enough');
    expect(await operator.ask(request, signal)).toBe('done');
  });

  it.each([
    ['', 1],
    ['{"format":"railproof/dialogue 1"}\n', 1],
    [`${answersHeader}{"t":1,"asked":"case"}\n`, 2],
    [`${answersHeader}{"t":1,"acknowledged":"mains","by":"a passer-by"}\n`, 2],
    [`${answersHeader}{"t":1,"asked":"case","answered":"done"}\nnull\n`, 3],
  ])('is not made of other lines: %j', (text, badLine) => {
    expect(readAnswers(text)).toEqual({ badLine });
  });

  it('loses an answer that was cut off while it was written', () => {
    const whole = `${answersHeader}{"t":1,"asked":"case","answered":"done"}\n`;
    expect(readAnswers(`${whole}{"t":2,"ask`)).toHaveLength(1);
  });
});
