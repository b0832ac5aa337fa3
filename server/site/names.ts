import { show } from '../../shared/pipeline/1-decode/topics.ts';
import type { Reading } from './reading.ts';

/** Things of one kind by the name that others refer to them by, each name once. */
export class Names<T = true> {
  readonly #reading: Reading;
  readonly #what: string;
  readonly #entries = new Map<string, { readonly pointer: string; readonly entry: T }>();
  #complete = true;

  constructor(reading: Reading, what: string) {
    this.#reading = reading;
    this.#what = what;
  }

  /** Some name is not known: an unknown reference may mean it, and is no fault of its own. */
  incomplete(): void {
    this.#complete = false;
  }

  /** Takes the name at `pointer` for `entry`; one that is taken already is a fault. */
  add(pointer: string, entry: T): void {
    const name = this.#reading.value<string>(pointer);
    if (name === undefined) return this.incomplete();
    const first = this.#entries.get(name);
    if (!first) this.#entries.set(name, { pointer, entry });
    else {
      // One of the two was to be called something else, which others may refer to.
      this.incomplete();
      const came = `${show(name)}, as at ${first.pointer}`;
      this.#reading.fault(pointer, `each ${this.#what} once`, came);
    }
  }

  /** What the name at `pointer` refers to; a name that is not there is a fault. */
  refer(pointer: string): T | undefined {
    const name = this.#reading.value<string>(pointer);
    if (name === undefined) return undefined;
    const known = this.#entries.get(name);
    if (!known && this.#complete) {
      const names = [...this.#entries.keys()].join(', ');
      this.#reading.faultAt(pointer, `a known ${this.#what}: ${names || 'there is none'}`);
    }
    return known?.entry;
  }
}
