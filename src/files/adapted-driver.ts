import {
  type Document,
  isMap,
  isSeq,
  parseDocument,
  Scalar,
  visit,
  type YAMLMap,
  type YAMLSeq,
} from '../libraries/yaml.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Wire } from './driver.js';
import { dimensionOfValue, meaningText } from './driver-dialogue-text.js';
import type { Exchange, ReadingMeaning } from './driver-dialogue.js';

/** What becomes of a driver file; what is not named stays as it is written. */
export interface Adaptation {
  readonly name: string;
  readonly wire: Partial<Pick<Wire, 'sendEnd' | 'replyEnd' | 'gap' | 'timeout' | 'echo' | 'prompt'>>;
  readonly settling?: Seconds | undefined;
  /** After the last message of an operation. */
  readonly rests: Readonly<Record<string, Seconds>>;
  /** Added to the dialogue, but for what stands there already. */
  readonly dialogue: readonly Exchange[];
  /** Stands above the dialogue, on one line. */
  readonly remark: string;
}

/**
 * The text of a driver file with some of its values changed, and with its comments. A line that is written as
 * those of the shipped drivers are stays as it was.
 */
export function adaptedDriver(text: string, adaptation: Adaptation): string {
  const document = parseDocument(text);
  const { name, wire, settling, rests } = adaptation;
  document.set('name', name);
  const { sendEnd, replyEnd, gap, timeout, echo, prompt } = wire;
  const written = {
    ...{ 'send-end': sendEnd && quoted(sendEnd), 'reply-end': replyEnd && quoted(replyEnd) },
    ...{ gap: gap === undefined ? gap : formatQuantity(gap, 'time') },
    ...{ timeout: timeout === undefined ? timeout : formatQuantity(timeout, 'time') },
    ...{ echo, prompt: prompt && quoted(prompt) },
  };
  for (const [key, value] of Object.entries(written)) {
    if (value !== undefined) document.setIn(['wire', key], value);
  }
  if (settling !== undefined) document.set('settling', formatQuantity(settling, 'time'));
  for (const [operation, rest] of Object.entries(rests)) letRest(document, operation, rest);
  addDialogue(document, adaptation);
  visit(document, {
    Collection: (_, node) => {
      padAsDriversDo(node);
    },
  });
  return document.toString({ lineWidth: 0 });
}

/** `{ send: "INP ON" }` has blanks inside its brackets, `["INP ON"]` none; the library knows one way for both. */
function padAsDriversDo(node: YAMLMap | YAMLSeq): void {
  const flowCollectionPadding = isMap(node) ? ' ' : '';
  const written = node.toString.bind(node);
  node.toString = (context, ...others) =>
    written(context && { ...context, flowCollectionPadding }, ...others);
}

function letRest(document: Document, operation: string, rest: Seconds): void {
  const messages = document.getIn(['operations', operation]);
  const last = isSeq(messages) ? messages.items.at(-1) : undefined;
  if (!isSeq(messages) || last === undefined) return;
  const time = formatQuantity(rest, 'time');
  if (isMap(last)) last.set('rest', time);
  else messages.items[messages.items.length - 1] = flowMap(document, { send: last, rest: time });
}

function addDialogue(document: Document, { dialogue, remark }: Adaptation): void {
  const before = document.get('dialogue');
  const known = new Set((isSeq(before) ? before.items : []).map((item) => JSON.stringify(item)));
  const added = dialogue
    .map((exchange) => flowMap(document, asWritten(exchange)))
    .filter((item) => {
      const text = JSON.stringify(item);
      if (known.has(text)) return false;
      known.add(text);
      return true;
    });
  const [first] = added;
  if (first === undefined) return;
  first.commentBefore = ` ${remark}`;
  for (const item of added) {
    if (item.get('is') === 'not-understood') item.comment = ' write what it means, once it is understood';
  }
  if (isSeq(before)) before.items.push(...added);
  else document.set('dialogue', document.createNode(added));
}

/** One line, `{ send: "INP ON", rest: 20 ms }`, in the order of its keys. */
function flowMap(document: Document, content: Readonly<Record<string, unknown>>): YAMLMap {
  const map = document.createNode(content, { flow: true });
  for (const { value } of map.items) if (isSeq(value)) value.flow = true;
  return map;
}

/** As a driver file has it. */
function asWritten(exchange: Exchange): Readonly<Record<string, unknown>> {
  switch (exchange.kind) {
    case 'identity':
      return { identity: quoted(exchange.answer), is: exchange.is };
    case 'errors':
      return { errors: quoted(exchange.answer), is: exchange.is };
    case 'ready':
      return { ready: quoted(exchange.answer), is: exchange.is };
    case 'operation': {
      const { operation, value, channel, sends } = exchange;
      return withoutGaps({
        ...{ operation, value: value === undefined ? value : valueText(operation, value), channel },
        sends: sends.map(quoted),
      });
    }
    case 'reading': {
      const { reading, channel, sends, heard } = exchange;
      return withoutGaps({
        ...{ reading, channel, sends: sends?.map(quoted) },
        ...{ answer: heard && quoted(heard.answer), is: heard && meaningAsWritten(heard.is) },
      });
    }
  }
}

function valueText(operation: string, value: number): string | number {
  const dimension = dimensionOfValue(operation);
  return dimension === undefined ? value : formatQuantity(value, dimension);
}

function meaningAsWritten(meaning: ReadingMeaning): string | number {
  return meaning.kind === 'channel' ? (meaning.value ?? 'none') : meaningText(meaning);
}

function quoted(text: string): Scalar<string> {
  const scalar = new Scalar(text);
  scalar.type = Scalar.QUOTE_DOUBLE;
  return scalar;
}

function withoutGaps(content: Readonly<Record<string, unknown>>): Readonly<Record<string, unknown>> {
  return Object.fromEntries(Object.entries(content).filter(([, value]) => value !== undefined));
}
