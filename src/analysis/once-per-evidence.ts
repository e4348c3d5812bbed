import type { Evidence } from './evidence.js';

/**
 * The same work, done once for each evidence: findings and every chart of a page ask for it again, and for a long
 * record it takes most of their time. Evidence does not change once it is handed over, so what was worked out stays
 * true; it is forgotten with it.
 */
export function oncePerEvidence<Seen>(work: (evidence: Evidence) => Seen): (evidence: Evidence) => Seen {
  const known = new WeakMap<Evidence, { readonly seen: Seen }>();
  return (evidence) => {
    const before = known.get(evidence);
    if (before !== undefined) return before.seen;
    const seen = work(evidence);
    known.set(evidence, { seen });
    return seen;
  };
}
