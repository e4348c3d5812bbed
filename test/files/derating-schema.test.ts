import { describe, expect, it } from 'vitest';
import { parseProcedure } from '../../src/files/read-procedure.js';
import { procedureExample, vocabulary } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const margin = 'derating: { margin: 80 %, above-nameplate: never }';
const line = '{ expected: 45 °C, full-to: 40 °C, falling-to: 50 %, at: 60 °C }';

function parse(derating: string) {
  expect(procedureExample).toContain(margin);
  const text = procedureExample.replace(margin, `derating: { ${derating} }`);
  return parseProcedure(text, 'real-limit.yaml', vocabulary);
}

describe('the derating of a procedure', () => {
  it('is read with its line, its loss model and its limit', () => {
    const derating = `margin: 75 %, above-nameplate: after-soak, ambient: ${line}, loss-model: { fixed: 10 % }, temperature-limit: 85 °C`;
    expect(parse(derating).derating).toEqual({
      margin: 0.75,
      aboveNameplate: 'after-soak',
      ambient: { expected: 45, fullTo: 40, fallingTo: 0.5, at: 60 },
      lossModel: { fixed: 0.1 },
      temperatureLimit: 85,
    });
  });

  it('may leave all but its margin out', () => {
    expect(parse('margin: 75 %').derating).toEqual({ margin: 0.75, aboveNameplate: 'never' });
  });

  it('takes no losses as fixed where the model does not say', () => {
    expect(parse('loss-model: {}').derating.lossModel).toEqual({ fixed: 0 });
  });

  it.each<[string, string]>([
    [
      `ambient: ${line.replace('at: 60', 'at: 40')}`,
      '11:79: derating.ambient.at: found 40 °C, and full load to 40 °C; the line falls from the one to the other, so this must be higher',
    ],
    [
      `ambient: ${line.replace('50 %', '110 %')}`,
      "11:69: derating.ambient.falling-to: found '110 %'; at most 100 % is needed",
    ],
    [
      `ambient: ${line.replace(', at: 60 °C', '')}`,
      '11:22: derating.ambient.at: missing; a temperature is needed',
    ],
    ['loss-model: { fixed: -1 % }', "11:34: derating.loss-model.fixed: found '-1 %'; at least 0 % is needed"],
    [
      `temperature-limit: 45 °C, ambient: ${line}`,
      '11:32: derating.temperature-limit: found 45 °C, and the air is expected to have 45 °C; nothing stays below that',
    ],
    ['temperature-limit: 85', 'found the bare number 85; a temperature needs its unit'],
    ['temprature-limit: 85 °C', "did you mean 'temperature-limit'?"],
  ])('is refused with its place: %s', (derating, problem) => {
    expect(problemsOf(() => parse(derating)).join('\n')).toContain(problem);
  });
});
