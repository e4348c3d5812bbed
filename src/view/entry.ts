import { createHash, timingSafeEqual } from 'node:crypto';

/** 192 bits: nobody guesses one, however long a run is. */
const secretBytes = 24;
/** Whoever has seen an old address could otherwise fill the terminal with new ones. */
const mostAfresh = 3;

export type Random = (bytes: number) => Uint8Array;

export type Shown =
  | { readonly kind: 'opened'; readonly session: string }
  /** It was opened before; `fresh` where it is time for another one, which otherwise was made already. */
  | { readonly kind: 'spent'; readonly fresh: string | undefined }
  /** The same, and so was the last one that there will be. */
  | { readonly kind: 'used-up' }
  | { readonly kind: 'unknown' };

/**
 * What lets a page in: a token that opens once, and the session that it is exchanged for. What is shown is compared in
 * a time that tells nothing of how much of it was right.
 */
export class Entry {
  readonly #random: Random;
  readonly #spent: string[] = [];
  readonly #sessions: string[] = [];
  #token: string;
  #afresh = 0;

  constructor(random: Random) {
    this.#random = random;
    this.#token = this.#secret();
  }

  get token(): string {
    return this.#token;
  }

  /** Somebody comes with a token. */
  show(token: string): Shown {
    if (isOneOf(token, this.#spent)) return this.#shownAgain();
    if (!isOneOf(token, [this.#token])) return { kind: 'unknown' };
    const session = this.#secret();
    this.#spent.push(this.#token);
    this.#sessions.push(session);
    return { kind: 'opened', session };
  }

  knows(session: string): boolean {
    return isOneOf(session, this.#sessions);
  }

  #shownAgain(): Shown {
    if (!this.#spent.includes(this.#token)) return { kind: 'spent', fresh: undefined };
    if (this.#afresh === mostAfresh) return { kind: 'used-up' };
    this.#afresh += 1;
    this.#token = this.#secret();
    return { kind: 'spent', fresh: this.#token };
  }

  #secret(): string {
    return Buffer.from(this.#random(secretBytes)).toString('base64url');
  }
}

function isOneOf(shown: string, secrets: readonly string[]): boolean {
  return secrets.map((secret) => timingSafeEqual(digest(shown), digest(secret))).includes(true);
}

/** All of one length, which that comparison needs. */
function digest(text: string): Buffer {
  return createHash('sha256').update(text).digest();
}
