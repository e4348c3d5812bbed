import { describe, expect, it } from 'vitest';
import type { Finding } from '../../src/analysis/finding.js';
import { changesInWords } from '../../src/report/changes.js';
import { droopOf, relationOf } from '../judgement/a-baseline.js';
import { inWords } from '../../src/analysis/finding.js';
import { asked, bonded, damaged, isolated, recordOf, recordsOf } from './compared-records.js';

const changes = (before: readonly Finding[], after: readonly Finding[], tolerance = asked) =>
  changesInWords(recordsOf(recordOf('before', before), recordOf('after', after), tolerance).comparison);

const style = (word: string) => inWords('limit-style', word, { step: 3 });

describe('what changed, in words', () => {
  it('is what had to, where all is well', () => {
    expect(changes(bonded, isolated)).toEqual([
      'earth-relation became isolated, as it must.',
      'Nothing else changed beyond its tolerance (1 compared).',
    ]);
    expect(changes(isolated, isolated)[0]).toBe('earth-relation is isolated, as it was before.');
  });

  it('names first what moved and must not, and by how much', () => {
    expect(changes(bonded, damaged)).toEqual([
      'droop-resistance moved from 18.00 mΩ to 36.00 mΩ, by +18.00 ± 0.28 mΩ (+100 %); allowed is 20 %.',
      'earth-relation became isolated, as it must.',
    ]);
    expect(changes([...isolated, style('hiccup')], [...isolated, style('latch-off')])[0]).toBe(
      'limit-style changed from hiccup to latch-off and must not.',
    );
  });

  it('names what did not change and must', () => {
    expect(changes(bonded, bonded)[0]).toBe('earth-relation is still bonded and must become isolated.');
    expect(changes(bonded, [relationOf('leaky')])[0]).toBe(
      'earth-relation is leaky and must become isolated.',
    );
  });

  it('names what can not be told, also what nobody looked at', () => {
    expect(changes([droopOf(0.018, 0.002)], [droopOf(0.018, 0.002)])).toEqual([
      "Whether droop-resistance and earth-relation are as they should be can't be told.",
    ]);
  });

  it('is nothing where nothing is asked of what there is', () => {
    expect(changes(bonded, isolated, [])).toEqual([
      'Nothing that the tolerance asks for is in these records.',
    ]);
    expect(changes([droopOf(1)], [droopOf(1)], asked.slice(1))).toEqual([
      'Nothing changed beyond its tolerance (1 compared).',
    ]);
  });
});
