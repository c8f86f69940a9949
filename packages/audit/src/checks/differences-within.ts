import type { Standings } from "@weighhouse/campaign/standings";

/** How many standard errors two evaluations of one evidence may lie apart. */
const SIGMAS = 5;

/**
 * How far a number of standings may lie from the computed one where evidences were integrated
 * numerically: within their stated errors. Both sides' errors count, in quadrature; the error in the
 * archive must itself be the computed one to half, so that no claim of a large one lets all pass.
 *
 * @returns the absolute difference allowed at a pointer; 0 where only rounding is
 */
export function statedErrors(computed: Standings): (pointer: string) => number {
  const errors = new Map(
    computed.hypotheses.map(({ key, lnEvidenceError }) => [key, Math.SQRT2 * lnEvidenceError]),
  );
  const errorOf = (key: string | undefined) => errors.get(key ?? "") ?? 0;
  const leader = errorOf(computed.hypotheses[0]?.key);
  const all = [...errors.values()].reduce((sum, error) => sum + error, 0);
  if (all === 0) return () => 0;
  return (pointer) => {
    const [, list, index, field, place, part] = pointer.split("/");
    if (list === "pairs") {
      const pair = computed.pairs[Number(index)];
      const both = Math.hypot(errorOf(pair?.a), errorOf(pair?.b));
      return pointer.endsWith("/log10BayesFactor") ? (SIGMAS * both) / Math.LN10 : 0;
    }
    const standing = list === "hypotheses" ? computed.hypotheses[Number(index)] : undefined;
    if (standing === undefined) return 0;
    const error = errorOf(standing.key);
    switch (field) {
      case "lnEvidence":
        return SIGMAS * error;
      case "lnEvidenceError":
        return 0.5 * standing.lnEvidenceError;
      case "log10BayesFactor":
        return (SIGMAS * Math.hypot(error, leader)) / Math.LN10;
      case "posterior":
        // d posterior / d ln Z is at most 1/4.
        return 0.25 * SIGMAS * all;
      case "parameters": {
        // The same points carry them: their errors are that of the evidence, in units of their sd.
        const sd = standing.parameters[Number(place)]?.sd ?? 0;
        return part === "key" ? 0 : 2 * SIGMAS * error * sd;
      }
      default:
        return 0;
    }
  };
}
