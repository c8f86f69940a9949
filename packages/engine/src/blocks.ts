import type { Sums } from "./sums";

/**
 * Draws that more than one measurand loads, each with its measurands: what couples measurands.
 * A draw of one measurand alone is that measurand's own affair.
 */
export function couplingDraws(sums: Sums): Map<number, number[]> {
  const touched = new Map<number, number[]>();
  sums.measurands.forEach(({ groups }, measurand) => {
    for (const draw of new Set(groups.flatMap(({ draws }) => draws))) {
      const measurands = touched.get(draw) ?? [];
      measurands.push(measurand);
      touched.set(draw, measurands);
    }
  });
  for (const [draw, measurands] of touched) if (measurands.length < 2) touched.delete(draw);
  return touched;
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
  const parent = new Map(measurands.map((measurand) => [measurand, measurand]));
  const rootOf = (measurand: number): number => {
    let root = measurand;
    while (parent.get(root) !== root) root = parent.get(root)!;
    parent.set(measurand, root);
    return root;
  };
  for (const touched of coupling.values()) {
    const inside = touched.filter((measurand) => parent.has(measurand));
    for (let i = 1; i < inside.length; i += 1) {
      const [a, b] = [rootOf(inside[0]!), rootOf(inside[i]!)];
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
