import type { AsymmetricRows } from "./greatest-likelihood";
import type { LevelRows } from "./level-rows";

/** Rows of a measurand as values with two sides; scatter is apart from those of asymmetric ones. */
export function asymmetricRows(
  { rows, readings }: LevelRows,
  { scatterVariance, period }: { scatterVariance: number; period: number },
): AsymmetricRows {
  const n = rows.length;
  const [plus, minus, extra] = [new Float64Array(n), new Float64Array(n), new Float64Array(n)];
  rows.forEach(({ variance }, i) => {
    const told = readings[i]?.told;
    if (told?.form === "asymmetric") {
      plus[i] = told.plus;
      minus[i] = told.minus;
      extra[i] = scatterVariance;
    } else {
      plus[i] = minus[i] = Math.sqrt(variance);
    }
  });
  return { y: Float64Array.from(rows, ({ y }) => y), plus, minus, extra, period };
}
