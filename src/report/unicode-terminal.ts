/**
 * Whether a terminal can be trusted with more than ASCII: by its locale, as POSIX orders its variables (XBD 8.2), or
 * by the terminal of the system that has none.
 */
export function showsUnicode({ LC_ALL, LC_CTYPE, LANG, WT_SESSION }: NodeJS.ProcessEnv): boolean {
  const locale = [LC_ALL, LC_CTYPE, LANG].find((value) => value !== undefined && value !== '');
  return locale === undefined ? WT_SESSION !== undefined : /utf-?8/i.test(locale);
}
