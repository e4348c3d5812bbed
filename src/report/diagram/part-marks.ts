import { type Circuit, modulesOf } from '../../arrangement/build.js';

/** By module: how the parts beside it are marked. */
export interface PartMarks {
  readonly ballast: ReadonlyMap<string, string>;
  readonly reverse: ReadonlyMap<string, string>;
  readonly or: ReadonlyMap<string, string>;
}

/**
 * The marks of a circuit's parts in the order of its modules: ballasts R1, R2 …; diodes D1, D2 …, those across
 * the outputs before those in series. Where a circuit is one arrangement of several, `all` names the modules of
 * them all, as the parts list numbers them: what stands at a module has one mark in every arrangement.
 */
export function partMarks(
  { form, ballast, reverseDiodes, orDiodes }: Circuit,
  all: readonly string[] = modulesOf(form),
): PartMarks {
  const numbered = (letter: string, isThere: boolean, after = 0): ReadonlyMap<string, string> =>
    new Map(
      isThere ? modulesOf(form).map((name) => [name, `${letter}${after + all.indexOf(name) + 1}`]) : [],
    );
  return {
    ballast: numbered('R', ballast !== undefined),
    reverse: numbered('D', reverseDiodes),
    or: numbered('D', orDiodes, reverseDiodes ? all.length : 0),
  };
}
