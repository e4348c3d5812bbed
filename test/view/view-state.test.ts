import { describe, expect, it } from 'vitest';
import {
  applied,
  leftBy,
  mostNotices,
  mostPoints,
  type ViewedEnd,
  type ViewedLeft,
  type ViewedPoint,
  type ViewMessage,
  type ViewState,
} from '../../src/view/view-state.js';
import fc from '../property.js';
import { before, point } from './page/viewed.js';

const after = (messages: readonly ViewMessage[], from: ViewState = before): ViewState =>
  messages.reduce(applied, from);

const told = (points: readonly ViewedPoint[]): readonly ViewMessage[] =>
  points.map((each) => ({ kind: 'point', point: each }));

describe('what a page knows of a run', () => {
  it('is all of it, for one that comes late', () => {
    const state = { ...before, step: 2, elapsed: 14 };
    expect(applied(before, { kind: 'everything', state })).toBe(state);
  });

  it('forgets the figures of a step with it, and keeps the curve', () => {
    const state = after([
      { kind: 'step', step: 1, elapsed: 0, remaining: 26 },
      { kind: 'figures', figures: { voltage: 15.2 }, elapsed: 1, remaining: 25 },
      ...told([point(0)]),
      { kind: 'step', step: 2, elapsed: 4, remaining: 22 },
    ]);
    expect(state).toMatchObject({ step: 2, elapsed: 4, remaining: 22, figures: {}, points: [point(0)] });
  });

  it('keeps the cautions in the order in which they are asked', () => {
    const cautions = ['wiring', 'mains'].map((name) => ({ name, text: 'Look.', by: undefined }));
    const state = after([{ kind: 'caution', caution: { name: 'wiring', text: 'Look.', by: 'operator' } }], {
      ...before,
      cautions,
    });
    expect(state.cautions.map(({ name, by }) => [name, by])).toEqual([
      ['wiring', 'operator'],
      ['mains', undefined],
    ]);
    const unasked = { name: 'source', text: '', by: '--yes' } as const;
    expect(applied(state, { kind: 'caution', caution: unasked }).cautions.at(-1)).toBe(unasked);
  });

  it('has nothing to ask any more once the run has ended', () => {
    const question = { id: 1, heading: 'To do', text: 'Unplug K1.', answer: 'done' } as const;
    const ended: ViewedEnd = {
      how: 'stopped',
      reason: 'stopped with Ctrl-C',
      answer: [],
      outcome: 'not-judged',
      safety: [],
      record: 'runs/x',
      report: null,
    };
    const state = after([{ kind: 'question', question }, { kind: 'stopping' }, { kind: 'ended', ended }]);
    expect(state).toMatchObject({ question: undefined, stopping: true, ended });
  });

  it('has how the bench was left until it is told what the run came to, and nothing to ask from then on', () => {
    const question = { id: 1, heading: 'To do', text: 'Unplug K1.', answer: 'done' } as const;
    const left: ViewedLeft = { how: 'completed', reason: null, safety: [], record: 'runs/x' };
    const atWork = after([
      { kind: 'question', question },
      { kind: 'working-out', left },
    ]);
    expect(atWork).toMatchObject({ workingOut: left, ended: undefined, question: undefined });
    expect(leftBy(atWork)).toBe(left);
    const ended: ViewedEnd = { ...left, answer: ['It holds.'], outcome: 'conforms', report: null };
    const over = applied(atWork, { kind: 'ended', ended });
    expect(over).toMatchObject({ workingOut: undefined, ended });
    expect(leftBy(over)).toBe(ended);
    expect(leftBy(before)).toBeUndefined();
  });

  it('lets time go on with a beat that tells it, and stand with one that does not', () => {
    const state = after([{ kind: 'beat', elapsed: 3, remaining: 23 }, { kind: 'beat' }]);
    expect(state).toMatchObject({ elapsed: 3, remaining: 23 });
  });

  it('holds no more notices than a page has room for, the newest', () => {
    const notices = Array.from({ length: mostNotices + 5 }, (_, index) => ({
      t: index,
      text: 'found again',
    }));
    const state = after(notices.map((notice) => ({ kind: 'notice', notice })));
    expect(state.notices).toEqual(notices.slice(5));
  });

  it('thins an old curve, and leaves what did not hold and all of the last', () => {
    const points = Array.from({ length: 2 * mostPoints }, (_, index) =>
      point(index / 1000, { outcome: index % 100 === 1 ? 'dropped' : 'held' }),
    );
    const { points: kept } = after(told(points));
    expect(kept.length).toBeLessThanOrEqual(mostPoints);
    expect(kept).toEqual(points.filter((each) => kept.includes(each)));
    for (const dropped of points.filter(({ outcome }) => outcome === 'dropped')) {
      expect(kept).toContain(dropped);
    }
    const last = points.slice(-mostPoints / 4);
    expect(kept.slice(-last.length)).toEqual(last);
  });

  it('never grows beyond its bounds, whatever the points came to', () => {
    const outcome = fc.constantFrom('held', 'dropped', 'measured', 'interrupted');
    fc.assert(
      fc.property(fc.array(outcome, { minLength: 1, maxLength: 9 }), (pattern) => {
        let state = before;
        for (let index = 0; index < 3 * mostPoints; index += 1) {
          const each = point(index, { outcome: pattern[index % pattern.length] ?? 'held' });
          state = applied(state, { kind: 'point', point: each });
          expect(state.points.length).toBeLessThanOrEqual(mostPoints);
          expect(state.points.at(-1)).toBe(each);
        }
      }),
      { numRuns: 15 },
    );
  });
});
