/** A reading with few outcomes: each hypothesis's posterior and the probability of each outcome. */
export interface OutcomeMixture {
  posterior: number;
  probabilities: readonly number[];
}

/** As `informationGain`, summed over outcomes. */
export function outcomeInformationGain(mixture: readonly OutcomeMixture[]): number {
  const outcomes = mixture[0]?.probabilities.length ?? 0;
  let bits = 0;
  for (let o = 0; o < outcomes; o += 1) {
    let mean = 0;
    for (const { posterior, probabilities } of mixture) mean += posterior * probabilities[o]!;
    for (const { posterior, probabilities } of mixture) {
      const p = probabilities[o]!;
      if (posterior > 0 && p > 0) bits += posterior * p * Math.log2(p / mean);
    }
  }
  return Math.max(bits, 0);
}

/** As `decisiveProbability`, summed over outcomes. */
export function outcomeDecisiveProbability(
  mixture: readonly OutcomeMixture[],
  {
    first,
    second,
    log10B,
  }: { first: readonly number[]; second: readonly number[]; log10B: number },
): number {
  let probability = 0;
  first.forEach((p, o) => {
    const total = log10B + Math.log10(p) - Math.log10(second[o]!);
    if (!(Math.abs(total) >= 1)) return;
    for (const one of mixture) probability += one.posterior * one.probabilities[o]!;
  });
  return Math.min(probability, 1);
}
