import { choleskyFactor } from "@weighhouse/numerics/symmetric-cholesky";

export type Pair = { a: string; b: string; coefficient: number };

/**
 * The blocks of correlated things whose correlation matrix isn't positive definite: no noises can
 * be correlated so, or one of them would be known exactly from the others.
 *
 * @param pairs each pair once; what no pair names has the correlation 0
 * @returns each such block's names, in the order in which the pairs name them
 */
export function indefiniteBlocks(pairs: readonly Pair[]): string[][] {
  return blocksOf(pairs)
    .filter(({ places, inside }) => !isDefinite(places, inside))
    .map(({ places }) => [...places.keys()]);
}

/** Names that pairs tie together, directly or through others, with the pairs that do. */
type Block = { places: Map<string, number>; inside: Pair[] };

function isDefinite(places: ReadonlyMap<string, number>, pairs: readonly Pair[]): boolean {
  const { size } = places;
  const matrix = new Float64Array(size * size);
  for (let i = 0; i < size; i++) matrix[i * size + i] = 1;
  for (const { a, b, coefficient } of pairs) {
    const [i, j] = [places.get(a)!, places.get(b)!];
    matrix[i * size + j] = coefficient;
    matrix[j * size + i] = coefficient;
  }
  return choleskyFactor(matrix, size).ok;
}

function blocksOf(pairs: readonly Pair[]): Block[] {
  const tied = new Map<string, Pair[]>();
  for (const pair of pairs) {
    for (const name of [pair.a, pair.b]) {
      const known = tied.get(name);
      if (known === undefined) tied.set(name, [pair]);
      else known.push(pair);
    }
  }
  const seen = new Set<string>();
  const blocks: Block[] = [];
  for (const start of tied.keys()) {
    if (!seen.has(start)) blocks.push(blockAround(start, tied, seen));
  }
  return blocks;
}

function blockAround(start: string, tied: ReadonlyMap<string, Pair[]>, seen: Set<string>): Block {
  const block: Block = { places: new Map([[start, 0]]), inside: [] };
  seen.add(start);
  // The map grows while it is gone through.
  for (const name of block.places.keys()) {
    for (const pair of tied.get(name) ?? []) {
      const other = pair.a === name ? pair.b : pair.a;
      if (pair.a === name) block.inside.push(pair);
      if (seen.has(other)) continue;
      seen.add(other);
      block.places.set(other, block.places.size);
    }
  }
  return block;
}
