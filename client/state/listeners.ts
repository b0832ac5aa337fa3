/** Who wants to hear of something; outside reactivity. */
export class Listeners<T> {
  readonly #all = new Set<(news: T) => void>();

  /** The returned function ends it. */
  add(hear: (news: T) => void): () => void {
    this.#all.add(hear);
    return () => this.#all.delete(hear);
  }

  tell(news: T): void {
    for (const hear of this.#all) hear(news);
  }
}
