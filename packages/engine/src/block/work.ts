import type { Layout } from "./layout";

/**
 * What is done for a block is counted in units of about a microsecond on a core of 2025, from counts
 * alone: it has to end in time, and the same input has to give the same bytes on any machine.
 */

/** One look at all rows: what is expected of them, and the factors of those that aren't Gaussian. */
export function workOfRows({ problem, others }: Layout): number {
  return 4 + 0.6 * problem.rows.count + 0.5 * others.length;
}

/** Whitening and eliminating once. */
export function workOfRound({ problem, start, size }: Layout): number {
  const { count } = problem.rows;
  const loaded = count === 0 ? 0 : start[count]! / count;
  return 2 + count * (0.3 + 0.05 * (loaded + 1) ** 2) + 0.02 * size ** 3;
}

/** A box that isn't a closed form: nested quadrature of two or three, a lattice of more. */
export function workOfBox(flats: number): number {
  if (flats < 2) return 0;
  return flats === 2 ? 50 : flats === 3 ? 1000 : 10_000;
}
