import type { Fault } from '../../shared/model/fault.ts';
import { show } from '../../shared/pipeline/1-decode/topics.ts';

/** JSON pointer (RFC 6901) of a field or element below another. */
export const pointerTo = (pointer: string, key: string | number): string =>
  `${pointer}/${String(key).replaceAll('~', '~0').replaceAll('/', '~1')}`;

/** A field or element of whatever it is; undefined where there is none. */
export const fieldOf = (value: unknown, key: string): unknown =>
  typeof value === 'object' && value !== null && Object.hasOwn(value, key)
    ? (value as Readonly<Record<string, unknown>>)[key]
    : undefined;

/**
 * A file under reading, by JSON pointer. What the schema found wrong is not
 * read, so that references are checked wherever the shape allows it.
 */
export class Reading {
  readonly faults: Fault[];
  readonly #resolved: Map<string, unknown>;
  readonly #misshapen: readonly string[];

  constructor(json: unknown, shapeFaults: readonly Fault[]) {
    this.#resolved = new Map([['', json]]);
    this.#misshapen = shapeFaults.map(({ path }) => path);
    this.faults = [...shapeFaults];
  }

  /** Of pointers made by `items` and plain field names: nothing in them is escaped. */
  #at(pointer: string): unknown {
    if (this.#resolved.has(pointer)) return this.#resolved.get(pointer);
    const cut = pointer.lastIndexOf('/');
    const value = fieldOf(this.#at(pointer.slice(0, cut)), pointer.slice(cut + 1));
    this.#resolved.set(pointer, value);
    return value;
  }

  #isSound(pointer: string): boolean {
    return !this.#misshapen.some(
      (path) =>
        path === pointer || path.startsWith(`${pointer}/`) || pointer.startsWith(`${path}/`),
    );
  }

  /** Pointers of a list's elements; none where there is no list. */
  items(pointer: string): string[] {
    const value = this.#at(pointer);
    return Array.isArray(value) ? value.map((_, i) => pointerTo(pointer, i)) : [];
  }

  isList(pointer: string): boolean {
    return Array.isArray(this.#at(pointer));
  }

  has(pointer: string): boolean {
    return this.#at(pointer) !== undefined;
  }

  /**
   * What stands at `pointer`, where the schema has passed it and all below it;
   * undefined otherwise and where nothing stands. `T` is what the schema says.
   */
  value<T>(pointer: string): T | undefined {
    return this.#isSound(pointer) ? (this.#at(pointer) as T | undefined) : undefined;
  }

  fault(path: string, expected: string, came: string): void {
    this.faults.push({ path, expected, came });
  }

  /** As `fault`, with what stands at the place. */
  faultAt(path: string, expected: string): void {
    this.fault(path, expected, show(this.#at(path)));
  }
}
