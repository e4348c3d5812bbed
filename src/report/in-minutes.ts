/** A moment of ISO 8601 in UTC as people read it, to the minute: `2026-11-30 09:15 UTC`. */
export function inMinutes(moment: string): string {
  return moment.replace('T', ' ').replace(/:\d\d(\.\d+)?Z$/, ' UTC');
}
