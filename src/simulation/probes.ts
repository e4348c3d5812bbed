import type { Group, Post } from '../files/bench.js';
import type { Simulation } from '../files/simulation-section.js';
import type { Seconds } from '../quantity/quantity.js';

/** Where the two probes of a meter are. */
export type ProbePlace =
  /** Across the output of the whole. */
  | { readonly kind: 'output' }
  | { readonly kind: 'output-of' | 'ballast-of' | 'earth-of'; readonly module: string }
  /** Held against each other. */
  | { readonly kind: 'together' }
  /** Nowhere. */
  | { readonly kind: 'apart' };

/** Two relays at once would tie two places of the circuit together: what is read then means nothing. */
export type MeterPlace = ProbePlace | { readonly kind: 'tied' };

const apart: ProbePlace = { kind: 'apart' };
const output: ProbePlace = { kind: 'output' };

/**
 * Where the meters of a bench are: each place's own across its place for good; the common one where a hand
 * has put its probes, else where the scanner puts it, else across the output of the whole.
 */
export class Probes {
  readonly #simulation: Pick<Simulation, 'circuit' | 'modules' | 'faults'>;
  readonly #group: Group | undefined;
  readonly #scanned: boolean;
  #hand: ProbePlace | undefined;
  #closed: readonly number[] = [];
  #closedAt: Seconds = 0;

  constructor(facts: {
    readonly simulation: Pick<Simulation, 'circuit' | 'modules' | 'faults'>;
    readonly group: Group | undefined;
    readonly scanned: boolean;
  }) {
    this.#simulation = facts.simulation;
    this.#group = facts.group;
    this.#scanned = facts.scanned;
  }

  /** A hand moves the common meter's probes; undefined is back to where they usually are. */
  move(place: ProbePlace | undefined): void {
    this.#hand = place;
  }

  /** The relays that the scanner holds closed from a moment on, for as long as it has power. */
  close(channels: readonly number[], at: Seconds): void {
    this.#closed = channels;
    this.#closedAt = at;
  }

  /** Where the meter at a post has its probes at a moment. */
  placeOf(post: Post, at: Seconds): MeterPlace {
    if (post !== 'meter') return this.#tap(Number(post.slice('meter-'.length)));
    if (this.#hand !== undefined) return this.#hand;
    return this.#scanned ? this.#throughScanner(at) : output;
  }

  #throughScanner(at: Seconds): MeterPlace {
    const [channel, ...others] = this.#closed;
    if (channel === undefined || this.#hasLetGo(at)) return apart;
    if (others.length > 0) return { kind: 'tied' };
    if (channel === this.#group?.outputChannel) return output;
    const index = this.#group?.places.findIndex((place) => place.channel === channel) ?? -1;
    return index === -1 ? apart : this.#tap(index + 1);
  }

  /** The scanner lost its power since it closed what it holds. */
  #hasLetGo(at: Seconds): boolean {
    return this.#simulation.faults.some(
      (fault) => fault.what === 'scanner-restarted' && fault.at > this.#closedAt && fault.at <= at,
    );
  }

  /** Across the ballast in a group, across the module's output in a stack. */
  #tap(place: number): ProbePlace {
    const { circuit, modules } = this.#simulation;
    const module = modules[place - 1]?.name;
    if (module === undefined) return apart;
    return { kind: circuit === 'parallel' ? 'ballast-of' : 'output-of', module };
  }
}
