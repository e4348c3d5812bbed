/** A sum to which terms are added and taken away again without leaving their rounding behind (Neumaier 1974). */
export class RunningSum {
  #sum = 0;
  #lost = 0;

  get value(): number {
    return this.#sum + this.#lost;
  }

  add(term: number): void {
    const sum = this.#sum + term;
    this.#lost += Math.abs(this.#sum) >= Math.abs(term) ? this.#sum - sum + term : term - sum + this.#sum;
    this.#sum = sum;
  }
}
