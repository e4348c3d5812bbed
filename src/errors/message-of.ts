/** What anything that was thrown says of itself: not everybody throws errors. */
export function messageOf(thrown: unknown): string {
  return thrown instanceof Error ? thrown.message : String(thrown);
}
