/** A body field by field: each reader answers what it read, or null with the fault on the list. */
import type { Fault } from '../model/fault.ts';
import { isMap } from '../pipeline/1-decode/frame.ts';
import { show } from '../pipeline/1-decode/topics.ts';
import { reportStrangers, type Parsed, type Report } from './parse.ts';

export class Body {
  /** Of the whole body. */
  readonly faults: Fault[];
  readonly #map: Readonly<Record<string, unknown>>;
  readonly #at: string;
  /** What is wrong within something that is no map is no news. */
  readonly #isMap: boolean;

  private constructor(value: unknown, at: string, faults: Fault[]) {
    this.#isMap = isMap(value);
    this.#map = isMap(value) ? value : {};
    this.#at = at;
    this.faults = faults;
  }

  /** A map of these fields and no others, `at` a JSON pointer; what is none reads as an empty one. */
  static of(value: unknown, fields: readonly string[], at = '', faults: Fault[] = []): Body {
    const report: Report = (path, expected, came) =>
      faults.push({ path, expected, came: show(came) });
    if (isMap(value)) reportStrangers(value, fields, at, report);
    else report(at || '/', `a map of ${fields.join(', ')}`, value);
    return new Body(value, at, faults);
  }

  has(name: string): boolean {
    return this.#map[name] !== undefined && this.#map[name] !== null;
  }

  inner(name: string, fields: readonly string[]): Body {
    const faults = this.#isMap ? this.faults : [];
    return Body.of(this.#map[name], fields, `${this.#at}/${name}`, faults);
  }

  fault(name: string, expected: string): null {
    const came = show(this.#map[name]);
    if (this.#isMap) this.faults.push({ path: `${this.#at}/${name}`, expected, came });
    return null;
  }

  text(name: string, expected: string): string | null {
    const value = this.#map[name];
    return typeof value === 'string' ? value : this.fault(name, expected);
  }

  /** Left out: empty. */
  note(name: string): string | null {
    return this.has(name) ? this.text(name, 'text') : '';
  }

  number(name: string, low: number, high: number, unit = ''): number | null {
    const value = this.#map[name];
    if (typeof value === 'number' && value >= low && value <= high) return value;
    return this.fault(name, `a number, ${low} to ${high}${unit}`);
  }

  whole(name: string, expected: string): number | null {
    const value = this.#map[name];
    return typeof value === 'number' && Number.isSafeInteger(value) && value >= 0
      ? value
      : this.fault(name, expected);
  }

  word<T extends string | number>(name: string, words: readonly T[]): T | null {
    const found = words.find((word) => word === this.#map[name]);
    return found ?? this.fault(name, words.join(' or '));
  }

  /** Each once, at least one. */
  words(name: string, expected: string): readonly string[] | null {
    const value = this.#map[name];
    if (!Array.isArray(value) || value.length === 0) return this.fault(name, expected);
    const texts = value.flatMap((one: unknown) => (typeof one === 'string' ? [one] : []));
    return texts.length === value.length && new Set(texts).size === texts.length
      ? texts
      : this.fault(name, expected);
  }
}

/** The value, if nothing was found fault with. */
export const parsed = <T>({ faults }: Body, value: T | null): Parsed<T> =>
  faults.length === 0 && value !== null ? { ok: true, value } : { ok: false, faults };
