/** The nodes that a bench publishes for. */
export interface BenchSite {
  readonly nodes: readonly { readonly id: string; readonly inputs: readonly string[] }[];
}
