/** What a coincidence noticed after the fact is worth. */
export interface Chance {
  p: number;
  /** In how many places it could have been noticed. */
  looks: number;
  /** 1 - (1 - p)^looks, for independent looks. */
  sidak: number;
  /** looks x p, at most 1: an upper bound however the looks hang together. */
  bonferroni: number;
  /** Of what was found against chance, at most: by p itself, and by Sidak's; null from 1/e on. */
  bayesFactorBound: number | null;
  bayesFactorBoundAfterLooks: number | null;
}

/**
 * The p of a coincidence corrected for the looks, and the upper bound on the Bayes factor against
 * chance,
 *
 *   1 / (-e p ln p),  p < 1/e
 *
 * taken at p and at Sidak's. Bounds, never evidence.
 *
 * @param p above 0, below 1
 * @param looks 1 or more
 * Accuracy: 1e-14 relative, for p down to 1e-300.
 * Source: Sidak, J. Am. Stat. Assoc. 62 (1967) 626; Sellke, Bayarri & Berger, Am. Stat. 55 (2001)
 * 62. Reference values: test/reference, bf.sbb_bound.
 */
export function chanceOf(p: number, looks: number): Chance {
  const sidak = -Math.expm1(looks * Math.log1p(-p));
  return {
    p,
    looks,
    sidak,
    bonferroni: Math.min(looks * p, 1),
    bayesFactorBound: boundOf(p),
    bayesFactorBoundAfterLooks: boundOf(sidak),
  };
}

function boundOf(p: number): number | null {
  return p < 1 / Math.E ? -1 / (Math.E * p * Math.log(p)) : null;
}
