/**
 * What is taken for earth when an unplugged module is measured. Where it has no earth of its own it is what
 * stands in for one in the test of its insulation: all that leads in, joined with all bare metal.
 */
export function earthPoint({
  protectionClass,
  input,
}: {
  readonly protectionClass: 'I' | 'II';
  readonly input: 'mains' | 'dc';
}): string {
  if (protectionClass === 'I') return input === 'mains' ? 'the earth pin of its plug' : 'its earth terminal';
  const leadsIn = input === 'mains' ? 'both pins of its plug' : 'both of its input terminals';
  return `${leadsIn}, joined with any bare metal of its case`;
}
