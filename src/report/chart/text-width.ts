/** The size of all text in drawings, in units of the drawing; the look sets the same. */
export const textSize = 13;
/** From one line of text to the next. */
export const lineHeight = 16;

/**
 * About how wide a text is when drawn, rather more than less: which font there will be is not known, and texts
 * must not run into each other in a broad one either.
 */
export function textWidth(text: string): number {
  return Array.from(text).reduce((sum, sign) => sum + widthOf(sign), 0) * textSize;
}

function widthOf(sign: string): number {
  if (/[ilj.,:;'|! ()[\]]/.test(sign)) return 0.4;
  if (/[mwMW%@Ω…—]/.test(sign)) return 1;
  // Scripts that are as wide as they are high.
  if (/[\u1100-\uffff]|[\ud800-\udbff]/.test(sign)) return 1.1;
  return /[A-Z+−±<>=]/.test(sign) ? 0.78 : 0.65;
}

/** Cut to a width, with an ellipsis where something is missing. */
export function cutToWidth(text: string, width: number): string {
  if (textWidth(text) <= width) return text;
  const signs = Array.from(text);
  while (signs.length > 0 && textWidth(`${signs.join('')}…`) > width) signs.pop();
  return `${signs.join('')}…`;
}

/** In lines no wider than this, broken between words; a longer word is cut. */
export function wrapToWidth(text: string, width: number): readonly string[] {
  const lines: string[] = [];
  for (const word of text.split(' ')) {
    const last = lines.at(-1);
    const longer = last === undefined ? word : `${last} ${word}`;
    if (last !== undefined && textWidth(longer) <= width) lines[lines.length - 1] = longer;
    else lines.push(cutToWidth(word, width));
  }
  return lines;
}
