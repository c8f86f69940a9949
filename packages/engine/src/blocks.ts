import type { Sums } from "./sums";

/**
 * Draws that more than one measurand loads, each with its measurands: what couples measurands.
 * A draw of one measurand alone is that measurand's own affair.
 */
export function couplingDraws({ draws, patterns, measurands }: Sums): Map<number, number[]> {
  const touched: number[][] = draws.map(() => []);
  measurands.forEach((one, measurand) => {
    for (const pattern of one.patterns) {
      for (const draw of patterns[pattern]!.draws) {
        const by = touched[draw]!;
        if (by.at(-1) !== measurand) by.push(measurand);
      }
    }
  });
  const coupling = new Map<number, number[]>();
  touched.forEach((by, draw) => {
    if (by.length > 1) coupling.set(draw, by);
  });
  return coupling;
}

/**
 * Parts measurands into blocks that share no unknown: their evidences multiply.
 *
 * @param measurands in increasing order
 * @returns blocks in the order of their first measurand, each in increasing order
 */
export function blocksOf(
  measurands: readonly number[],
  coupling: ReadonlyMap<number, readonly number[]>,
): number[][] {
  if (measurands.length < 2) return measurands.map((measurand) => [measurand]);
  const parent = new Map(measurands.map((measurand) => [measurand, measurand]));
  const rootOf = (measurand: number): number => {
    let root = measurand;
    while (parent.get(root) !== root) root = parent.get(root)!;
    parent.set(measurand, root);
    return root;
  };
  let apart = measurands.length;
  for (const touched of coupling.values()) {
    // All in one block: no further draw can join anything.
    if (apart === 1) return [[...measurands]];
    const inside = touched.filter((measurand) => parent.has(measurand));
    for (let i = 1; i < inside.length; i += 1) {
      const [a, b] = [rootOf(inside[0]!), rootOf(inside[i]!)];
      if (a !== b) apart -= 1;
      parent.set(Math.max(a, b), Math.min(a, b));
    }
  }
  const blocks = new Map<number, number[]>();
  for (const measurand of measurands) {
    const root = rootOf(measurand);
    const block = blocks.get(root);
    if (block === undefined) blocks.set(root, [measurand]);
    else block.push(measurand);
  }
  return [...blocks.values()];
}
