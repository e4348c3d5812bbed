import { describe, expect, it } from 'vitest';
import { stepKinds } from '../../src/steps/index.js';

const least: Readonly<Record<string, Record<string, string>>> = {
  'load-ramp': { to: '4 A' },
  'dropout-search': { ceiling: '8 A' },
};

describe('no step goes on unguarded, or overloads, for as long as a slip of the pen says', () => {
  it.each([
    ['load-ramp', 'dwell', '60 s', '61 s'],
    ['dropout-search', 'dwell', '60 s', '1 h'],
    ['dropout-search', 'watch', '30 s', '31 s'],
    ['dropout-search', 'recovery', '10 min', '601 s'],
    ['open-circuit', 'for', '24 h', '25 h'],
    ['wait', 'for', '24 h', '1441 min'],
  ])('%s: %s may be %s and not %s', (kind, name, most, more) => {
    const schema = stepKinds.find((one) => one.kind === kind)?.parameters;
    expect(schema?.safeParse({ ...least[kind], [name]: most }).success).toBe(true);
    const refused = schema?.safeParse({ ...least[kind], [name]: more });
    expect(refused?.error?.issues).toMatchObject([
      { path: [name], message: expect.stringMatching(/; at most .+ is needed$/) as string },
    ]);
  });
});
