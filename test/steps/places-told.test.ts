import { describe, expect, it } from 'vitest';
import { type ProofLook, tellPlaces } from '../../src/steps/places-told.js';
import fc from '../property.js';

const names = ['K1', 'K2', 'K3', 'K4'] as const;
type Name = (typeof names)[number];

/** Who stands at each place, by the name of the place, and how eager each is: only the most eager carry. */
interface Wired {
  readonly stands: ReadonlyMap<Name, Name>;
  readonly eagerness: ReadonlyMap<Name, number>;
}

/** With all plugged in, and without each of them in turn. */
function looksAt({ stands, eagerness }: Wired): readonly ProofLook[] {
  const places = [...stands.keys()];
  return [undefined, ...places].map((unplugged) => {
    const plugged = [...stands.values()].filter((name) => name !== unplugged);
    const most = Math.max(...plugged.map((name) => eagerness.get(name) ?? 0));
    const carries = (name: Name | undefined): boolean =>
      name !== undefined && name !== unplugged && eagerness.get(name) === most;
    return {
      unplugged,
      read: new Map(places.map((place) => [place, carries(stands.get(place)) ? 1 : 0.01])),
    };
  });
}

function wired(order: readonly Name[], eagerness: readonly number[]): Wired {
  return {
    stands: new Map(order.map((name, index) => [names[index] ?? 'K1', name])),
    eagerness: new Map(order.map((name) => [name, eagerness[names.indexOf(name)] ?? 0])),
  };
}

const tell = (group: Wired) => tellPlaces(looksAt(group), 0.2);
const eagernesses = fc.array(fc.integer({ min: 0, max: 2 }), { minLength: 4, maxLength: 4 });
const orders = fc.shuffledSubarray([...names], { minLength: 4, maxLength: 4 });

describe('whose place is whose', () => {
  it('is shown at once where all carry', () => {
    expect([...tell(wired(['K1', 'K2', 'K3'], [1, 1, 1])).values()]).toEqual([
      { kind: 'own' },
      { kind: 'own' },
      { kind: 'own' },
    ]);
  });

  it('is shown for two of which one hogs, though the other is dead with both plugged in', () => {
    const told = tell(wired(['K1', 'K2'], [2, 1]));
    expect([...told.values()]).toEqual([{ kind: 'own' }, { kind: 'own' }]);
  });

  it.each([[[2, 1]], [[1, 2]], [[1, 1]]])(
    'two that are swapped are found whichever of them hogs: %j',
    (eagerness) => {
      const told = tell(wired(['K2', 'K1'], eagerness));
      expect(told.get('K1')).toEqual({ kind: 'another', modules: ['K2'] });
      expect(told.get('K2')).toEqual({ kind: 'another', modules: ['K1'] });
    },
  );

  it('no module of a group wired as it is named is ever accused, whoever hogs', () => {
    fc.assert(
      fc.property(eagernesses, (eagerness) => {
        for (const { kind } of tell(wired(names, eagerness)).values())
          expect(['own', 'untold']).toContain(kind);
      }),
    );
  });

  it('no place is ever taken for its own where another module stands there', () => {
    fc.assert(
      fc.property(orders, eagernesses, (order, eagerness) => {
        const group = wired(order, eagerness);
        for (const [place, told] of tell(group)) {
          if (told.kind === 'own') expect(group.stands.get(place as Name)).toBe(place);
          if (told.kind === 'another') expect(told.modules).toContain(group.stands.get(place as Name));
        }
      }),
    );
  });

  it('two that are swapped are found wherever one of them carries with all plugged in', () => {
    fc.assert(
      fc.property(
        eagernesses,
        fc.shuffledSubarray([0, 1, 2, 3], { minLength: 2, maxLength: 2 }),
        (eagerness, pair) => {
          const [one = 0, other = 0] = pair;
          const order = names.map(
            (name, index) => (index === one ? names[other] : index === other ? names[one] : name) ?? name,
          );
          fc.pre(Math.max(eagerness[one] ?? 0, eagerness[other] ?? 0) === Math.max(...eagerness));
          const told = [...tell(wired(order, eagerness)).values()];
          expect(told.some(({ kind }) => kind === 'another')).toBe(true);
        },
      ),
    );
  });

  it('is not guessed where a third hogs: neither of the others carries without it or without each other', () => {
    const told = tell(wired(['K1', 'K3', 'K2'], [2, 1, 1]));
    expect(told.get('K2')).toEqual({ kind: 'untold', others: ['K3'] });
    expect(told.get('K3')).toEqual({ kind: 'untold', others: ['K2'] });
  });

  it('a channel that is stuck at one place shows at all others, and swaps nobody', () => {
    const stuck = looksAt(wired(['K1', 'K2', 'K3'], [1, 1, 1])).map(({ unplugged, read }) => ({
      unplugged,
      read: new Map([...read.keys()].map((place) => [place, read.get('K2') ?? 0])),
    }));
    const told = tellPlaces(stuck, 0.2);
    expect([...told.values()]).toEqual([{ kind: 'none' }, { kind: 'own' }, { kind: 'none' }]);
  });

  it('a place at which nothing is ever read shows nothing', () => {
    const off = looksAt(wired(['K1', 'K2'], [1, 1])).map(({ unplugged, read }) => ({
      unplugged,
      read: new Map(read).set('K2', 0),
    }));
    expect(tellPlaces(off, 0.2).get('K2')).toEqual({ kind: 'untold', others: [] });
  });
});
