/** At most so many signs of a text, never cut through one; the whole of it where it is no longer. */
export function cutText(text: string, longest: number): string {
  if (text.length <= longest) return text;
  const isHalf = /[\uD800-\uDBFF]$/.test(text.slice(0, longest));
  return text.slice(0, isHalf ? longest - 1 : longest);
}
