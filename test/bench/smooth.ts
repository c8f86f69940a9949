/**
 * A curve under a smooth tolerance, whose covariance is never an N x N matrix: time by N, against a
 * plain Cholesky of that matrix. Run by `npm run bench`.
 */
import { evidencesOf } from "@weighhouse/engine/evidences";
import { createState } from "@weighhouse/engine/state";
import { curveCampaign } from "./curve-campaign";
import { choleskyMs } from "./plain-dense";
import { line, medianMs } from "./timing";

console.log("\nA smooth tolerance along a curve, all evidences; linear in N is a ratio of 1");
console.log("        N       ms   us per N  ratio   one N x N Cholesky (ms)  Cholesky / ours");
let first = 0;
for (const n of [1000, 10_000, 100_000]) {
  const made = createState(curveCampaign(n, true));
  if (!made.ok) throw new Error(JSON.stringify(made.problems.slice(0, 3)));
  for (let warm = 0; warm < 3; warm += 1) evidencesOf(made.value);
  const ms = medianMs(5, () => evidencesOf(made.value));
  const each = (1000 * ms) / n;
  first ||= each;
  // Of a thousand; it grows as N^3.
  const dense = n === 1000 ? choleskyMs(n) : null;
  console.log(
    line([
      [n, 9],
      [ms.toFixed(1), 8],
      [each.toFixed(2), 10],
      [(each / first).toFixed(2), 6],
      [dense === null ? "-" : dense.toFixed(0), 25],
      [dense === null ? "-" : (dense / ms).toFixed(0), 16],
    ]),
  );
}
