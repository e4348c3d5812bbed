/**
 * Places for labels that want to stand at `wanted` and must be `gap` apart, between `from` and `to`; in the
 * order of `wanted`. None is further from where it wants to be than it must: those that would overlap form a
 * block about the middle of their wishes. Where there is no room for all they stand closer.
 */
export function spread(
  wanted: readonly number[],
  gap: number,
  [from, to]: readonly [number, number],
): readonly number[] {
  const room = wanted.length < 2 ? gap : Math.min(gap, (to - from) / (wanted.length - 1));
  const order = wanted.map((_, index) => index).sort((a, b) => (wanted[a] ?? 0) - (wanted[b] ?? 0));
  const blocks: Block[] = [];
  for (const index of order) {
    let block = settled({ members: [index], wishes: wanted[index] ?? 0, first: 0 }, room, from, to);
    for (
      let above = blocks.at(-1);
      above !== undefined && overlaps(above, block, room);
      above = blocks.at(-1)
    ) {
      blocks.pop();
      block = settled(joined(above, block, room), room, from, to);
    }
    blocks.push(block);
  }
  const places = new Array<number>(wanted.length).fill(0);
  for (const { members, first } of blocks)
    members.forEach((member, index) => (places[member] = first + index * room));
  return places;
}

interface Block {
  readonly members: readonly number[];
  /** Sum of where its first would have to stand for each member to be where it wants to be. */
  readonly wishes: number;
  readonly first: number;
}

function settled(block: Block, room: number, from: number, to: number): Block {
  const length = (block.members.length - 1) * room;
  const best = block.wishes / block.members.length;
  return { ...block, first: Math.max(from, Math.min(to - length, best)) };
}

function overlaps(above: Block, below: Block, room: number): boolean {
  return above.first + above.members.length * room > below.first + 1e-9;
}

function joined(above: Block, below: Block, room: number): Block {
  return {
    members: [...above.members, ...below.members],
    wishes: above.wishes + below.wishes - below.members.length * above.members.length * room,
    first: above.first,
  };
}
