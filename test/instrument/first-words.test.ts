import { expect, it } from 'vitest';
import { firstWords } from '../../src/instrument/first-words.js';

it.each([
  ['nothing', '', { echo: false, reply: undefined, prompt: undefined, replyEnd: undefined }],
  ['a line', 'NURSERY,LOAD\n', { echo: false, reply: 'NURSERY,LOAD', prompt: undefined, replyEnd: '\n' }],
  ['a return and a line feed', 'NURSERY,LOAD\r\n', { reply: 'NURSERY,LOAD', replyEnd: '\r\n' }],
  ['a return alone', 'NURSERY,LOAD\r', { reply: 'NURSERY,LOAD', replyEnd: '\r' }],
  ['no end', 'NURSERY,LOAD', { reply: 'NURSERY,LOAD', prompt: undefined, replyEnd: undefined }],
  ['an echo', '*IDN?\r\nNURSERY,LOAD\r\n', { echo: true, reply: 'NURSERY,LOAD', replyEnd: '\r\n' }],
  ['an echo and no answer', '*IDN?\r\n', { echo: true, reply: undefined }],
  ['a prompt', 'NURSERY,LOAD\n> ', { echo: false, reply: 'NURSERY,LOAD', prompt: '> ' }],
  ['a prompt on a line of its own', 'NURSERY,LOAD\r\n\r\n> ', { prompt: '\r\n> ', replyEnd: '\r\n' }],
  ['an echo, an answer and a prompt', '*IDN?\rNURSERY\r=>', { echo: true, reply: 'NURSERY', prompt: '=>' }],
  ['another line', 'NURSERY,LOAD\nsomething\n', { reply: 'NURSERY,LOAD', prompt: undefined }],
])('reads %s in what came first', (_, text, seen) => {
  expect(firstWords(text, '*IDN?')).toMatchObject(seen);
});
