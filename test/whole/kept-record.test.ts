import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { resultAsJson } from '../../src/report/json.js';
import { understand } from '../../src/report/understand.js';

const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';

it('a record that was kept is whole, and gives the findings it gave when it was made', () => {
  const result = understand(kept);
  expect(result.integrity.kind).toBe('whole');
  expect(JSON.parse(JSON.stringify(resultAsJson(result)))).toEqual(
    JSON.parse(readFileSync(join(kept, 'findings.json'), 'utf8')),
  );
});
