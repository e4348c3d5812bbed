/**
 * A module of the build, as users have it, and not of the sources: what is timed is what they wait for.
 *
 * @example
 * import type * as lineFit from '../../src/statistics/line-fit.js';
 * const { fitLine } = await built<typeof lineFit>('statistics/line-fit.js');
 */
export async function built<Module>(path: string): Promise<Module> {
  return (await import(new URL(`../../dist/${path}`, import.meta.url).href)) as Module;
}
