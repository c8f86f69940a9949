import { sharedUnknowns } from "./model/shared-unknowns";
import { drawIndex, type Sums } from "./sums";
import type { Roles, Workspace } from "./workspace";

/**
 * Draws that more than one measurand loads, each with its measurands: what couples measurands.
 * A draw of one measurand alone is that measurand's own affair.
 */
export function couplingDraws(sums: Sums): Map<number, number[]> {
  const touched: number[][] = sums.draws.map(() => []);
  const touch = (draw: number, measurand: number) => {
    const by = touched[draw]!;
    if (by.at(-1) !== measurand) by.push(measurand);
  };
  sums.measurands.forEach((one, measurand) => {
    for (const pattern of one.patterns) {
      for (const draw of sums.patterns[pattern]!.draws) touch(draw, measurand);
    }
    for (const { draws } of one.curves) for (const draw of draws) touch(draw, measurand);
    for (const { loadings } of one.kept) {
      for (const { error, batch } of loadings) touch(drawIndex(sums, { error, batch }), measurand);
    }
  });
  const coupling = new Map<number, number[]>();
  touched.forEach((by, draw) => {
    if (by.length > 1) coupling.set(draw, by);
  });
  return coupling;
}

/** Sets of measurands that something ties together under these roles, draws of their own beside. */
export function couplingOf(workspace: Workspace, roles: Roles): (readonly number[])[] {
  return [...workspace.coupling.values(), ...workspace.ties, ...tiesOf(workspace, roles)];
}

/** Measurands that a hypothesis's parameters, ensemble or correlated tolerances tie together. */
function tiesOf({ frame }: Workspace, roles: Roles): number[][] {
  const tied = new Map<string, number[]>();
  roles.forEach((place, measurand) => {
    const role = place === null ? undefined : frame.measurands[measurand]!.roles[place];
    if (role?.kind !== "predicted") return;
    for (const key of sharedUnknowns(frame, measurand, role)) {
      const there = tied.get(key);
      if (there === undefined) tied.set(key, [measurand]);
      else there.push(measurand);
    }
  });
  return [...tied.values()].filter((measurands) => measurands.length > 1);
}

/**
 * Parts measurands into blocks that share no unknown: their evidences multiply.
 *
 * @param measurands in increasing order
 * @param coupling sets of measurands that hang together
 * @returns blocks in the order of their first measurand, each in increasing order
 */
export function blocksOf(
  measurands: readonly number[],
  coupling: Iterable<readonly number[]>,
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
  for (const touched of coupling) {
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
