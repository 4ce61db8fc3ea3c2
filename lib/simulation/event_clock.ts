/** A binary heap of reactions by the time of their next event, in which any reaction can be found and moved.
 *
 * Source: M. A. Gibson & J. Bruck, J. Phys. Chem. A 104 (2000) 1876 (indexed priority queue). */
export class EventClock {
  readonly #times: Float64Array;
  readonly #heap: Int32Array;
  readonly #place: Int32Array;

  /** A clock with a time for each reaction.
   *
   * @param times time of the next event of each reaction, `Infinity` for never; kept and changed */
  constructor(times: Float64Array) {
    this.#times = times;
    this.#heap = Int32Array.from(times, (_, i) => i);
    this.#place = Int32Array.from(times, (_, i) => i);
    for (let i = (times.length >> 1) - 1; i >= 0; i--) this.#sink(i);
  }

  /** The reaction whose event comes first. */
  get first(): number {
    return this.#heap[0];
  }

  /** Time of the next event of a reaction. */
  timeOf(reaction: number): number {
    return this.#times[reaction];
  }

  /** Sets the time of the next event of a reaction. */
  set(reaction: number, time: number): void {
    this.#times[reaction] = time;
    this.#rise(this.#place[reaction]);
    this.#sink(this.#place[reaction]);
  }

  #rise(at: number): void {
    while (at > 0) {
      const parent = (at - 1) >> 1;
      if (this.#times[this.#heap[parent]] <= this.#times[this.#heap[at]]) return;
      this.#swap(at, parent);
      at = parent;
    }
  }

  #sink(at: number): void {
    for (;;) {
      let least = at;
      for (const child of [2 * at + 1, 2 * at + 2]) {
        if (child >= this.#heap.length) break;
        if (this.#times[this.#heap[child]] < this.#times[this.#heap[least]]) least = child;
      }
      if (least === at) return;
      this.#swap(at, least);
      at = least;
    }
  }

  #swap(i: number, j: number): void {
    const [a, b] = [this.#heap[i], this.#heap[j]];
    this.#heap[i] = b;
    this.#heap[j] = a;
    this.#place[b] = i;
    this.#place[a] = j;
  }
}
