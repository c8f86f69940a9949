/**
 * Nested sampling in 4, 6 and 10 dimensions: a normal peak in the unit cube, whose evidence is known;
 * likelihood evaluations, error and time, against plain Monte Carlo with as many evaluations. Run by
 * `npm run bench`.
 */
import { integrateUnitCube } from "@weighhouse/numerics/log-integral";
import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import { LN_SQRT_2PI, logNormalInterval } from "@weighhouse/numerics/normal";
import { randomSource } from "@weighhouse/numerics/random-source";
import { line } from "./timing";

const SEED = 20_310_301;

function peak(sd: number) {
  return (u: Float64Array): number => {
    let squares = 0;
    for (const x of u) squares += ((x - 0.5) / sd) ** 2;
    return -squares / 2 - u.length * (LN_SQRT_2PI + Math.log(sd));
  };
}

/** ln of the mean of the density at points drawn evenly. */
function plain(f: (u: Float64Array) => number, dimension: number, points: number): number {
  const random = randomSource(SEED);
  const u = new Float64Array(dimension);
  const terms = Array.from({ length: points }, () => f(u.map(() => random.uniform())));
  return logSumExp(terms) - Math.log(points);
}

console.log(
  "\nNested sampling of a normal peak, against plain Monte Carlo with as many evaluations",
);
console.log(
  "  dimensions    sd   nats  evaluations  stated error  |ln Z - exact|  plain's       ms",
);
for (const [dimension, sd] of [
  [4, 0.05],
  [6, 0.05],
  [10, 0.05],
] as const) {
  const f = peak(sd);
  const exact = dimension * logNormalInterval(-0.5 / sd, 0.5 / sd);
  const start = performance.now();
  const found = integrateUnitCube(f, dimension, { seed: SEED });
  const ms = performance.now() - start;
  const others = plain(f, dimension, found.evaluations);
  console.log(
    line([
      [dimension, 12],
      [sd, 5],
      [found.information.toFixed(1), 6],
      [found.evaluations, 12],
      [found.error.toFixed(3), 13],
      [Math.abs(found.ln - exact).toFixed(3), 15],
      [Math.abs(others - exact).toFixed(3), 8],
      [ms.toFixed(0), 8],
    ]),
  );
}
