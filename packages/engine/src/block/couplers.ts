import type { BlockProblem } from "./problem";

/** Conditioning on more than this many normal unknowns costs more than a lattice. */
const MOST = 2;

/**
 * The few normal unknowns that couple flat ones: given them, the flat unknowns are independent.
 *
 * @returns none where it takes more than two, or where conditioning on normal ones doesn't part them
 */
export function couplersOf(problem: BlockProblem): ReadonlySet<number> {
  const { linear, rows, design, varying, atFit, correlations } = problem;
  const none = new Set<number>();
  if (rows.groups.length + rows.smooth.length + varying.length + atFit.length > 0) return none;
  // Noises that hang together, and columns that move, are left to the lattice.
  const flatsOf = linear.map(() => new Set<number>());
  for (let i = 0; i < rows.count; i += 1) {
    const some = design.column.subarray(design.start[i]!, design.start[i + 1]!);
    for (const k of some) {
      for (const f of some) if (linear[f]!.kind === "flat") flatsOf[k]!.add(f);
    }
  }
  const couplers = new Set<number>();
  linear.forEach(({ kind }, k) => {
    if (kind === "normal" && flatsOf[k]!.size > 1) couplers.add(k);
  });
  if (couplers.size === 0 || couplers.size > MOST) return none;
  const links: [number, number][] = correlations.map(({ first, second }) => [first, second]);
  for (let i = 0; i < rows.count; i += 1) {
    const [first, ...others] = design.column.subarray(design.start[i]!, design.start[i + 1]!);
    const kept = [first!, ...others].filter((k) => k !== undefined && !couplers.has(k));
    for (const k of kept.slice(1)) links.push([kept[0]!, k]);
  }
  const open = links.filter(([a, b]) => !couplers.has(a) && !couplers.has(b));
  return arePartedBy(linear.length, open, (k) => linear[k]!.kind === "flat") ? couplers : none;
}

/** Whether no two flat unknowns are linked through others. */
function arePartedBy(
  size: number,
  links: readonly (readonly [number, number])[],
  isFlat: (k: number) => boolean,
): boolean {
  const parent = Int32Array.from({ length: size }, (_, k) => k);
  const rootOf = (k: number): number => {
    let root = k;
    while (parent[root] !== root) root = parent[root]!;
    parent[k] = root;
    return root;
  };
  for (const [a, b] of links) {
    const [one, other] = [rootOf(a), rootOf(b)];
    parent[Math.max(one, other)] = Math.min(one, other);
  }
  const seen = new Set<number>();
  for (let k = 0; k < size; k += 1) {
    if (!isFlat(k)) continue;
    if (seen.has(rootOf(k))) return false;
    seen.add(rootOf(k));
  }
  return true;
}
