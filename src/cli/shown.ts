import { jsonText } from '../report/json-text.js';
import { resultAsJson } from '../report/json.js';
import type { Result } from '../report/result.js';
import { styleFor } from '../report/style.js';
import { chartsAsText } from '../report/terminal-chart/result-charts.js';
import { resultAsText } from '../report/text.js';
import { showsUnicode } from '../report/unicode-terminal.js';
import { hanging } from './say.js';
import type { Streams } from './streams.js';

const chart = { width: 72, height: 16 };

/**
 * A result as stdout shows it: one JSON object, or the report. On a terminal a small chart ends it; a pipe is for
 * programs that look for lines, and has none.
 */
export function shown(result: Result, json: boolean, { stdout, environment }: Streams): string {
  if (json) return jsonText(resultAsJson(result));
  const text = resultAsText(result, styleFor(stdout, environment), stdout.columns);
  if (!stdout.isTTY) return text;
  const columns = stdout.columns === 0 ? chart.width : stdout.columns;
  const charts = chartsAsText(result, {
    width: Math.min(chart.width, columns - 1),
    height: chart.height,
    unicode: showsUnicode(environment),
  });
  return hanging(text, stdout.columns) + (charts === '' ? '' : `\n${charts}\n`);
}
