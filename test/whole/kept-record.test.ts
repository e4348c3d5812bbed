import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { resultAsJson } from '../../src/report/json.js';
import { understand } from '../../src/report/understand.js';

const kept = 'fixtures/runs';

it.each(readdirSync(kept))('%s is whole, and gives the findings it gave when it was made', (run) => {
  const result = understand(join(kept, run));
  expect(result.integrity.kind).toBe('whole');
  expect(JSON.parse(JSON.stringify(resultAsJson(result)))).toEqual(
    JSON.parse(readFileSync(join(kept, run, 'findings.json'), 'utf8')),
  );
});
