import { describe, expect, it } from 'vitest';
import type { RunHeader } from '../../../src/record/run-header.js';
import { instrumentsAlike } from '../../../src/report/comparison-page/instruments-alike.js';
import { headerOf } from '../../analysis/evidence-of.js';

/** A record made with these; by role, what each calls itself. */
function madeWith(names: Readonly<Record<string, string>>): RunHeader {
  const header = headerOf();
  const [one] = header.instruments as [RunHeader['instruments'][number]];
  const instruments = Object.entries(names).map(([role, identity]) => ({ ...one, role, identity }));
  return { ...header, instruments };
}

function said(then: Readonly<Record<string, string>>, now: Readonly<Record<string, string>>): string {
  return instrumentsAlike(madeWith(then), madeWith(now)).join(' ');
}

const independent = 'independent in the two';
const common = 'is then common to both and falls out of a difference';

describe('the instruments of two records', () => {
  it('are the same as far as their names tell, which is said', () => {
    const text = said({ load: 'L 1', meter: 'M 1' }, { load: 'L 1', meter: 'M 1' });
    expect(text).toContain('the load and meter are the same in both records; nothing else tells.');
    expect(text).toContain(common);
    expect(text).not.toContain(independent);
  });

  it('are independent where one was exchanged, and not where the other remained', () => {
    const text = said({ load: 'L 1', meter: 'M 1' }, { load: 'L 1', meter: 'M 2' });
    expect(text).toContain(`the meter is another one in the later record. Its errors are ${independent}`);
    expect(text).toContain('the load is the same in both records; nothing else tells. Part of its error');
    expect(text).toContain(common);
  });

  it('that only one record has are not another one, but missing', () => {
    const text = said({ load: 'L 1', thermometer: 'T 1' }, { load: 'L 1', meter: 'M 1' });
    expect(text).toContain('Only the earlier record was made with a thermometer.');
    expect(text).toContain('Only the later record was made with a meter.');
    expect(text).not.toContain('another one');
  });

  it('of records without any are not spoken of', () => {
    expect(said({}, {})).toBe('');
  });
});
