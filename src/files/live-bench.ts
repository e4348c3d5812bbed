import { parseDocument } from 'yaml';
import { placeOf, type Post } from './bench.js';

/**
 * The text of a bench file whose instruments are replayed from `<post>.jsonl` beside it, and the person's answers
 * from `operator.jsonl`; their drivers from `driver-<post>.yaml`, where those are beside it too.
 */
export function asReplayed(text: string, posts: readonly Post[], withDrivers: boolean): string {
  const document = parseDocument(text);
  for (const post of posts) {
    const place = placeOf(post);
    document.setIn([...place, 'connection'], `replay:${post}.jsonl`);
    if (withDrivers) document.setIn([...place, 'driver'], `driver-${post}.yaml`);
  }
  document.set('operator', 'replay:operator.jsonl');
  return document.toString();
}

/**
 * The text of a bench file with the addresses of its instruments replaced, by post, and without the
 * section that says what is simulated: what is served is real to whoever uses it.
 */
export function withAddresses(text: string, addresses: Readonly<Partial<Record<Post, string>>>): string {
  const document = parseDocument(text);
  for (const [post, address] of Object.entries(addresses) as [Post, string][]) {
    document.setIn([...placeOf(post), 'connection'], address);
  }
  document.deleteIn(['simulation']);
  return document.toString();
}
