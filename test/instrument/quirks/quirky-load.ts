import { toyLoad } from '../fixtures/toy-load.js';
import type { Knows } from './quirky-instrument.js';

/** What the load of these tests knows, and the state it is in. */
export function quirkyLoad(): { readonly knows: Knows; readonly state: ReturnType<typeof toyLoad>['state'] } {
  const load = toyLoad();
  return {
    state: load.state,
    knows: (message) => {
      const [arrival] = load.react(message, 0);
      return arrival && Buffer.from(arrival.bytes).toString('latin1').trimEnd();
    },
  };
}
