import type { ScpiError } from './scpi-error.js';
import type { Missing } from './side-talk.js';
import { visible } from './visible.js';

/** What an instrument did that nobody asked for; `shown` is escaped and cut. */
export type Notice =
  | { readonly kind: 'unasked-bytes'; readonly shown: string; readonly size: number }
  | { readonly kind: 'out-of-step'; readonly question: string }
  | { readonly kind: 'late-reply'; readonly shown: string }
  | { readonly kind: 'missing'; readonly what: Missing }
  | { readonly kind: 'no-control-lines'; readonly asked: string; readonly reason: string }
  | { readonly kind: 'in-step-again' }
  | { readonly kind: 'stale-error'; readonly entry: ScpiError }
  | { readonly kind: 'harmless-error'; readonly entry: ScpiError }
  | { readonly kind: 'told-again'; readonly entry: ScpiError };

/** Told in words for people, and as facts for programs. */
export type OnNotice = (text: string, notice: Notice) => void;

export function noticeText(address: string, notice: Notice): string {
  switch (notice.kind) {
    case 'unasked-bytes':
      return `${address} sent ${notice.size} bytes that nobody had asked for: "${notice.shown}"`;
    case 'out-of-step':
      return `${address} left "${notice.question}" unanswered; before the next question it must get back in step`;
    case 'late-reply':
      return `${address} sent "${notice.shown}" too late; it is thrown away`;
    case 'missing':
      return `${address} did not ${missingWords[notice.what]}, as its driver says it does; before the next question it must get back in step`;
    case 'no-control-lines':
      return `${address} has no control lines to set (${notice.asked}: ${notice.reason}); an instrument that waits for them will not answer`;
    case 'in-step-again':
      return `${address} is in step again`;
    case 'stale-error':
      return `${address} had an error from before: ${entryText(notice.entry)}`;
    case 'harmless-error':
      return `${address} reports ${entryText(notice.entry)}, which its driver calls harmless`;
    case 'told-again':
      return `${address} reports ${entryText(notice.entry)}; it is told the same again`;
  }
}

const missingWords: Readonly<Record<Missing, string>> = {
  echo: 'repeat what it was told',
  prompt: 'send its prompt',
};

function entryText({ number, text }: ScpiError): string {
  return `${number} "${visible(text)}"`;
}
