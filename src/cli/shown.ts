import { jsonText } from '../report/json-text.js';
import { resultAsJson } from '../report/json.js';
import type { Result } from '../report/result.js';
import { styleFor } from '../report/style.js';
import { resultAsText } from '../report/text.js';
import type { Streams } from './streams.js';

/** A result as stdout shows it: one JSON object, or the report. */
export function shown(result: Result, json: boolean, streams: Streams): string {
  return json
    ? jsonText(resultAsJson(result))
    : resultAsText(result, styleFor(streams.stdout, streams.environment));
}
