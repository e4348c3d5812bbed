/** Lets one act at a time have its way, in the order in which they asked. */
export class Turns {
  #last: Promise<unknown> = Promise.resolve();

  take<Result>(act: () => Promise<Result>): Promise<Result> {
    const mine = this.#last.then(act);
    this.#last = mine.catch(() => undefined);
    return mine;
  }
}
