import { printable } from '../printable.js';

/** A piece of HTML or SVG, well-formed. Only the functions below make one, so no foreign text is ever taken for it. */
export type Markup = Written;

/** What stands within an element: texts are escaped, `undefined` and `false` leave nothing. */
export type Content = Markup | string | number | undefined | false | readonly Content[];

/** Left out where undefined; numbers are rounded to a tenth, which no eye can tell in a drawing. */
export type Attributes = { readonly [name in AttributeName]?: string | number | undefined } & {
  /** Within the page only. */
  readonly href?: `#${string}` | undefined;
};

class Written {
  readonly #text: string;

  constructor(text: string) {
    this.#text = text;
  }

  toString(): string {
    return this.#text;
  }
}

/** An element with its attributes and what stands within it. */
export function element(name: ElementName, attributes: Attributes, ...content: readonly Content[]): Markup {
  const opened = `<${name}${Object.entries(attributes).map(attribute).join('')}`;
  if (empty.has(name)) return new Written(`${opened}>`);
  return new Written(`${opened}>${content.map(written).join('')}</${name}>`);
}

/** Pieces one after the other. */
export function together(...content: readonly Content[]): Markup {
  return new Written(content.map(written).join(''));
}

/** A number of a drawing, to a tenth. */
export function short(value: number): string {
  return String(Math.round(value * 10) / 10 + 0);
}

function written(content: Content): string {
  if (content instanceof Written) return content.toString();
  if (content === undefined || content === false) return '';
  if (typeof content === 'object') return content.map(written).join('');
  return escaped(unbroken(String(content)));
}

function attribute([name, value]: [string, string | number | undefined]): string {
  if (value === undefined) return '';
  return ` ${name}="${escaped(typeof value === 'number' ? short(value) : value)}"`;
}

const escapes: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

/** A number and its unit stay on one line, and an uncertainty with its sign. */
function unbroken(text: string): string {
  return text
    .replace(/± (?=\d)/g, '±\u00a0')
    .replace(/(\d) (?=(?:[µmkM]?[VAWΩ]|%|°C|K|min|h|s)(?![\p{L}\d]))/gu, '$1\u00a0');
}

/** In text and between double quotes alike (HTML Living Standard, 13.3); what steers or hides itself is shown. */
function escaped(text: string): string {
  return printable(text).replace(/[&<>"']/g, (sign) => escapes[sign] ?? '');
}

/** What can be written: neither scripts nor anything that loads, and no attribute that runs or fetches. */
export const htmlNames = [
  ...['main', 'header', 'footer', 'nav', 'section', 'div', 'figure', 'figcaption', 'h1', 'h2', 'h3', 'p'],
  ...['ul', 'ol', 'li', 'dl', 'dt', 'dd', 'a', 'strong', 'em', 'span', 'abbr', 'time', 'details', 'summary'],
  ...['table', 'caption', 'thead', 'tbody', 'tr', 'th', 'td', 'br', 'wbr'],
] as const;
export const svgNames = [
  ...['svg', 'title', 'desc', 'g', 'defs', 'clipPath', 'path', 'line', 'rect', 'circle', 'text', 'tspan'],
] as const;
export const attributeNames = [
  ...['id', 'class', 'lang', 'role', 'href', 'datetime', 'scope', 'colspan', 'tabindex', 'title'],
  ...['aria-label', 'aria-labelledby', 'aria-describedby', 'aria-hidden'],
  ...['viewBox', 'width', 'height', 'x', 'y', 'dx', 'dy', 'x1', 'y1', 'x2', 'y2', 'cx', 'cy', 'r', 'rx', 'd'],
  ...['transform', 'text-anchor', 'clip-path', 'data-of', 'data-head'],
] as const;
const empty: ReadonlySet<string> = new Set(['br', 'wbr']);

type ElementName = (typeof htmlNames)[number] | (typeof svgNames)[number];
type AttributeName = (typeof attributeNames)[number];
