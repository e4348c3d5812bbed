import { inMinutes } from '../in-minutes.js';
import { css } from './look.js';
import { type Content, element, type Markup, together } from './markup.js';

/** Who made a page, and when; both are arguments, so that the same build gives the same page. */
export interface Made {
  /** Program and version. */
  readonly program: string;
  readonly date: Date;
}

/** What sorts of page there are; each is written over its own kind only. */
export type PageKind = 'build sheet' | 'report' | 'comparison';

/** What is to be read: what it is, its answer, then one section after the other. */
export interface Sheet {
  /** Above the title: what sort of page it is, a few words. */
  readonly kind: string;
  readonly title: string;
  /** Below the title: what the page is about, where the title alone does not say it. */
  readonly about?: Content;
  /** Below that and before all sections: what the reader came for. */
  readonly answer: Content;
  readonly sections: readonly (Markup | undefined)[];
}

export interface Page extends Sheet {
  readonly made: Made;
  readonly pageKind: PageKind;
}

// No scripts, pictures, fonts, frames, forms: whatever got into the page could neither run nor send.
const policy = "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'";

/** By which a page of ours is known among other files, before it is written over. */
export function pageMark(kind: PageKind): string {
  return `<meta name="generator" content="railproof ${kind}">`;
}

/** One file that needs no other: it opens from a stick, reads on a narrow screen, and prints on A4. */
export function pageText({ kind, title, about, answer, sections, made, pageKind }: Page): string {
  const body = together(
    element('a', { class: 'skip', href: '#answer' }, 'To the answer'),
    element('header', {}, element('p', { class: 'kind' }, kind), element('h1', {}, title), about),
    element('main', {}, element('div', { id: 'answer' }, answer), sections),
    element(
      'footer',
      {},
      'Made by ',
      made.program,
      ' on ',
      element('time', { datetime: made.date.toISOString() }, inMinutes(made.date.toISOString())),
      '. This file needs no network and no other file.',
    ),
  );
  return [
    '<!doctype html>',
    '<html lang="en">',
    '<head>',
    '<meta charset="utf-8">',
    `<meta http-equiv="Content-Security-Policy" content="${policy}">`,
    '<meta name="viewport" content="width=device-width, initial-scale=1">',
    '<meta name="referrer" content="no-referrer">',
    pageMark(pageKind),
    element('title', {}, `${title} · railproof`).toString(),
    `<style>${css}</style>`,
    '</head>',
    '<body>',
    body.toString(),
    '</body>',
    '</html>',
    '',
  ].join('\n');
}

/** A section with its heading, reachable by it; nothing where nothing is in it. */
export function section(heading: string, ...content: readonly Content[]): Markup {
  const id = idOf(heading);
  return element('section', { 'aria-labelledby': id }, element('h2', { id }, heading), content);
}

/** By which a section is reached, within the page. */
export function idOf(heading: string): string {
  return heading.toLowerCase().replace(/[^a-z0-9]+/g, '-');
}

/** A list of sentences; undefined without any. */
export function bullets(sentences: readonly Content[]): Markup | undefined {
  return sentences.length === 0
    ? undefined
    : element('ul', {}, ...sentences.map((sentence) => element('li', {}, sentence)));
}
