/**
 * Words for the size of a Bayes factor, from the log10 table (not the 2 ln B one) of
 * Kass & Raftery, J. Am. Stat. Assoc. 90 (1995) 773, section 3.2.
 *
 * @param log10BayesFactor any finite number; the sign says for whom, the words say how much
 */
export function kassRaftery(log10BayesFactor: number): string {
  const size = Math.abs(log10BayesFactor);
  if (size < 0.5) return "not worth more than a bare mention";
  if (size < 1) return "substantial";
  return size < 2 ? "strong" : "decisive";
}
