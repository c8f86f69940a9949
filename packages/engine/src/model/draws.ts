import type { Expected, Section } from "./section";

/** Key of a shared error's draw among a block's unknowns. */
export function drawKey(draw: number): string {
  return `draw ${draw}`;
}

/**
 * Loads the shared errors' draws on a section's rows. A relative one is a share of what is
 * expected: of a number, of what moves with the outer unknowns, or of a polynomial's fit.
 *
 * @param shared draws of which a polynomial is loaded somewhere in the block
 */
export function loadDraws(
  { assembly, begin, rows }: Section,
  expected: Expected,
  shared: ReadonlySet<number>,
): void {
  rows.forEach(({ draws, loadings, relative }, i) => {
    draws.forEach((draw, d) => {
      const unknown = assembly.addLinear(drawKey(draw), { kind: "normal" });
      const loading = loadings[d]!;
      const ofLevel = relative[d]!;
      if (shared.has(draw)) {
        const { coefficient, level, of, fills } = assembly.shareOf(unknown);
        coefficient[begin + i] = loading;
        if (!ofLevel) level[begin + i] = 1;
        else if (expected.moving) fills.push(() => (level[begin + i] = expected.values[i]!));
        else level[begin + i] = expected.values[i]!;
        for (const one of ofLevel ? expected.coefficients : []) of.add(one);
      } else if (ofLevel && expected.moving) {
        assembly.loadMoving(unknown, (column) => {
          column[begin + i]! += loading * expected.values[i]!;
        });
      } else assembly.load(unknown, begin + i, ofLevel ? loading * expected.values[i]! : loading);
    });
  });
}

/** The draws that are a share of a polynomial's fit on some row. */
export function drawsOnFits(sections: readonly { polynomial: boolean; rows: Section["rows"] }[]) {
  const shared = new Set<number>();
  for (const { polynomial, rows } of sections) {
    if (!polynomial) continue;
    for (const { draws, relative } of rows) {
      draws.forEach((draw, d) => {
        if (relative[d]) shared.add(draw);
      });
    }
  }
  return shared;
}
