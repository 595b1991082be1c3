/** Likeliest chains of links from a sender to all nodes, to see without simulation who cannot be a single point of failure. */
import type { LinkRow } from "./link-table.ts";

interface Way {
  /** Product of the reception ratios along the chain; 0: there is none within the hop bound. */
  probability: number;
  /** Places in between. */
  between: number[];
}

export class Ways {
  /** sender x receiver. */
  private readonly prr: Float64Array;
  private readonly n: number;
  private readonly known = new Map<number, Way[]>();

  /** ids: node numbers by place. */
  constructor(
    links: readonly LinkRow[],
    ids: readonly number[],
    private readonly hops: number,
  ) {
    this.n = ids.length;
    this.prr = new Float64Array(this.n * this.n);
    const place = new Map(ids.map((id, i) => [id, i]));
    for (const { from, to, prr } of links) this.prr[(place.get(from) ?? 0) * this.n + (place.get(to) ?? 0)] = prr;
  }

  /** Can the place be done without on every way from the source to `to` that is at least this likely? */
  roundabout(source: number, to: number, without: number, probability: number): boolean {
    let ways = this.known.get(source);
    if (!ways) {
      ways = this.from(source, -1);
      this.known.set(source, ways);
    }
    const way = ways[to];
    if (way.probability >= probability && !way.between.includes(without)) return true;
    return this.from(source, without)[to].probability >= probability;
  }

  /** Best way to every place by at most `hops` links (Bellman and Ford, by number of links), around one place. */
  private from(source: number, without: number): Way[] {
    const { n, prr, hops } = this;
    let best = Array.from({ length: n }, (_, place): Way => ({ probability: place === source ? 1 : 0, between: [] }));
    for (let hop = 1; hop <= hops; hop++) {
      const next = [...best];
      for (let from = 0; from < n; from++) {
        const { probability, between } = best[from];
        if (probability === 0 || from === without) continue;
        for (let to = 0; to < n; to++) {
          const product = probability * prr[from * n + to];
          if (product > next[to].probability) next[to] = { probability: product, between: from === source ? between : [...between, from] };
        }
      }
      best = next;
    }
    return best;
  }
}
