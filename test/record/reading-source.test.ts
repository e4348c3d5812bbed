import { describe, expect, it } from 'vitest';
import { ReadingSources, type ReadingSource } from '../../src/record/reading-source.js';
import fc from '../property.js';

const textOf = (source: ReadingSource): string => `,${JSON.stringify(source).slice(1, -1)},"value":`;
const name = fc.stringMatching(/^[a-zA-Z0-9 -]{0,8}$/);
const source = fc.record({ of: name, what: name, at: name }, { requiredKeys: ['of', 'what'] });

describe('the source of a reading', () => {
  it('is told by its bytes, in whatever order sources come and whatever becomes of where they stood', () => {
    fc.assert(
      fc.property(
        fc.array(source, { minLength: 1, maxLength: 20 }),
        fc.array(fc.nat(), { maxLength: 100 }),
        (all, order) => {
          const sources = new ReadingSources();
          const room = Buffer.alloc(200);
          for (const index of order) {
            const expected = all[index % all.length] ?? { of: '', what: '' };
            const text = textOf(expected);
            room.fill(0).write(`17${text}15.2}`, 3, 'latin1');
            expect(sources.at(room, 5)).toEqual(expected);
            expect(sources.end).toBe(5 + text.length);
          }
        },
      ),
    );
  });

  it('is made once: the next time it is the same texts', () => {
    const sources = new ReadingSources();
    const bytes = Buffer.from(`${textOf({ of: 'load', what: 'current', at: 'output-of-K1' })}4}`);
    expect(sources.at(bytes, 0)).toBe(sources.at(bytes, 0));
  });

  it('is left to whoever parses the line where there are more than anyone needs', () => {
    const sources = new ReadingSources();
    const at = (index: number): ReadingSource | undefined =>
      sources.at(Buffer.from(textOf({ of: `module-${index}`, what: 'voltage' })), 0);
    const told = Array.from({ length: 1000 }, (_, index) => at(index)).filter((one) => one !== undefined);
    expect(told.length).toBeGreaterThan(4 * 24);
    expect(told.length).toBeLessThan(1000);
    expect(at(0)).toEqual({ of: 'module-0', what: 'voltage' });
    expect(at(999)).toBeUndefined();
  });

  it.each([
    ',"of":"load","value":',
    ',"of":"lo\\u0061d","what":"x","value":',
    ',"of":"lâd","what":"x","value":',
    '}',
  ])('that stands there otherwise, %s, is none', (text) => {
    expect(new ReadingSources().at(Buffer.from(text), 0)).toBeUndefined();
  });
});
