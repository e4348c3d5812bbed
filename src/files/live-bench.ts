import { type Document, isAlias, parseDocument } from '../libraries/yaml.js';
import { placeOf, type Post } from './bench.js';

/**
 * The text of a bench file whose instruments are replayed from `<post>.jsonl` beside it, and the person's answers
 * from `operator.jsonl`; their drivers from `driver-<post>.yaml`, where those are beside it too.
 */
export function asReplayed(text: string, posts: readonly Post[], withDrivers: boolean): string {
  const document = parseDocument(text);
  for (const post of posts) {
    setAt(document, post, 'connection', `replay:${post}.jsonl`);
    if (withDrivers) setAt(document, post, 'driver', `driver-${post}.yaml`);
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
    setAt(document, post, 'connection', address);
  }
  document.deleteIn(['simulation']);
  return document.toString();
}

/** An instrument that is written as another one again gets words of its own. */
function setAt(document: Document, post: Post, key: 'connection' | 'driver', text: string): void {
  const place = placeOf(post);
  const written = document.getIn(place, true);
  if (isAlias(written)) document.setIn(place, document.createNode(written.toJS(document)));
  document.setIn([...place, key], text);
}
