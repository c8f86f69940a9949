import { choleskyFactor, solveSymmetric } from "@weighhouse/numerics/symmetric-cholesky";
import { covarianceOf, type NoisePart } from "./covariance";
import type { Workbench } from "./workbench";

/**
 * Adds to each row what its smooth process is at the best fit, K C^-1 (residual left over).
 *
 * @param distance minus what is left over after the linear unknowns, by row; added to in place
 */
export function addProcessValues(bench: Workbench, distance: Float64Array): void {
  for (const whole of bench.plan.parts) {
    if (whole.processes.length === 0) continue;
    // At the best fit of the Gaussian rows alone, the process's other values say nothing.
    const part = { ...whole, latents: [] };
    if (part.groups.length === 0 && part.processes.length === 1) {
      smoothAlong(bench, part, distance);
    } else throughCovariance(bench, part, distance);
  }
}

function throughCovariance({ layout, state }: Workbench, part: NoisePart, distance: Float64Array) {
  const size = part.rows.length;
  const whole = choleskyFactor(covarianceOf(layout, part, state.variance), size);
  if (!whole.ok) return;
  const weights = new Float64Array(size);
  part.rows.forEach((i, n) => (weights[n] = -distance[i]!));
  solveSymmetric(whole.factor, weights);
  const none = new Float64Array(state.variance.length);
  const process = covarianceOf(layout, { ...part, groups: [] }, none);
  part.rows.forEach((i, n) => {
    for (let m = 0; m < size; m += 1) distance[i]! += process[n * size + m]! * weights[m]!;
  });
}

/**
 * The same for one process in O(N): the Kalman filter along x and the Rauch-Tung-Striebel smoother
 * back.
 * Source: Sarkka, Bayesian Filtering and Smoothing (2013), 4.3 and 8.2.
 */
function smoothAlong({ layout, state }: Workbench, part: NoisePart, distance: Float64Array): void {
  const process = layout.problem.rows.smooth[part.processes[0]!]!;
  const place = new Map(Array.from(process.rows, (i, k) => [i, process.x[k]!]));
  const steps = part.rows.map((row) => ({ row, x: place.get(row)!, mean: 0, variance: 0 }));
  steps.sort((a, b) => a.x - b.x);
  const whole = process.sd ** 2;
  let [mean, variance, previous] = [0, whole, -Infinity];
  for (const step of steps) {
    const kept = Math.exp(-(step.x - previous) / process.length);
    mean *= kept;
    variance = variance * kept * kept + whole * (1 - kept * kept);
    const gain = variance / (variance + state.variance[step.row]!);
    mean += gain * (-distance[step.row]! - mean);
    variance *= 1 - gain;
    Object.assign(step, { mean, variance });
    previous = step.x;
  }
  let smoothed = steps.at(-1)?.mean ?? 0;
  for (let n = steps.length - 1; n >= 0; n -= 1) {
    const step = steps[n]!;
    const after = steps[n + 1];
    if (after !== undefined) {
      const kept = Math.exp(-(after.x - step.x) / process.length);
      const predicted = step.variance * kept * kept + whole * (1 - kept * kept);
      const gain = predicted > 0 ? (step.variance * kept) / predicted : 0;
      smoothed = step.mean + gain * (smoothed - kept * step.mean);
    }
    distance[step.row]! += smoothed;
  }
}
