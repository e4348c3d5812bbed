import { printable } from '../../quantity/printable.js';

/** A place of the shell. It is there, or page and shell are not of one build. */
export function place(id: string): HTMLElement {
  const found = document.getElementById(id);
  if (found === null) throw new Error(`the page has no place called ${id}`);
  return found;
}

/** An element with its attributes and what stands in it; every text is text, with what steers or hides itself shown. */
export function made<Name extends keyof HTMLElementTagNameMap>(
  name: Name,
  attributes: Readonly<Record<string, string>> = {},
  ...content: readonly (Node | string)[]
): HTMLElementTagNameMap[Name] {
  const element = document.createElement(name);
  for (const [key, value] of Object.entries(attributes)) element.setAttribute(key, value);
  element.append(...content.map((each) => (typeof each === 'string' ? printable(each) : each)));
  return element;
}

/** The same in a drawing. */
export function drawn(
  name: 'svg' | 'path' | 'circle',
  attributes: Readonly<Record<string, string>>,
  ...content: readonly Node[]
): SVGElement {
  const element = document.createElementNS('http://www.w3.org/2000/svg', name);
  for (const [key, value] of Object.entries(attributes)) element.setAttribute(key, value);
  element.append(...content);
  return element;
}

/** Writes a text only where it is another, so that nobody is told twice. */
export function write(element: Element, text: string): void {
  const shown = printable(text);
  if (element.textContent !== shown) element.textContent = shown;
}

/** Shows an element or takes it away. */
export function show(element: HTMLElement, wanted: boolean): void {
  if (element.hidden === wanted) element.hidden = !wanted;
}

/** Does something only when what it rests on has changed. */
export function whenChanged<Value>(act: (value: Value) => void): (value: Value) => void {
  let last: { readonly value: Value } | undefined;
  return (value) => {
    if (last !== undefined && Object.is(last.value, value)) return;
    last = { value };
    act(value);
  };
}
