/** Equally likely values in increasing order. */
export interface Draws {
  kind: "draws";
  sorted: Float64Array;
  /** Of n, the k-th is the (k - 1) / (n - 1) quantile (`ends`), or the (k - 1/2) / n one (`middles`). */
  places: "ends" | "middles";
  mean: number;
  sd: number;
}

/**
 * Draws with their mean and sd.
 *
 * @param values NaN where there is no value: those are left out
 * @returns null where half of the draws or more have no value
 */
export function drawsOf(values: Float64Array, places: Draws["places"] = "ends"): Draws | null {
  const sorted = values.filter((value) => !Number.isNaN(value)).sort();
  const { length } = sorted;
  if (2 * length <= values.length) return null;
  let sum = 0;
  for (const value of sorted) sum += value;
  const mean = sum / length;
  let squares = 0;
  for (const value of sorted) squares += (value - mean) ** 2;
  return { kind: "draws", sorted, places, mean, sd: Math.sqrt(squares / length) };
}

/** How many draws are at most x. */
export function drawsBelow({ sorted }: Draws, x: number): number {
  let [low, high] = [0, sorted.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle]! <= x) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Between two draws it is interpolated. */
export function drawsQuantile({ sorted, places }: Draws, p: number): number {
  const { length } = sorted;
  const place = places === "ends" ? p * (length - 1) : p * length - 0.5;
  const low = Math.min(Math.max(Math.floor(place), 0), length - 1);
  const high = Math.min(low + 1, length - 1);
  const [a, b] = [sorted[low]!, sorted[high]!];
  const share = Math.min(Math.max(place - low, 0), 1);
  return share === 0 || a === b ? a : a + share * (b - a);
}
