import { norm } from "./pivoted-qr";
import { addRow, createSystem, type TriangularSystem } from "./triangular-system";

/** The step and the Levenberg-Marquardt parameter that it solves with. */
export interface TrustRegionStep {
  step: Float64Array;
  parameter: number;
}

/**
 * The step p that makes |R p + q|^2 smallest within |D p| <= radius, to 10 % of the radius:
 * (R'R + parameter D^2) p = -R' q, the parameter by a safeguarded Newton iteration.
 *
 * @param system R, and q as its right-hand side
 * @param scale D's diagonal, > 0
 * @param guess where the parameter's iteration starts
 * Source: J. J. More, The Levenberg-Marquardt algorithm, Lecture Notes in Mathematics 630 (1978) 105,
 * algorithm 5.5; MINPACK lmpar.
 */
export function trustRegionStep(
  system: TriangularSystem,
  scale: Float64Array,
  radius: number,
  guess: number,
): TrustRegionStep {
  const { size, data } = system;
  const width = size + 1;
  const full = hasFullRank(system);
  let step = backSubstitute(system);
  let excess = scaledNorm(step, scale) - radius;
  if (excess <= 0.1 * radius) return { step, parameter: 0 };

  // Bounds of the parameter: Newton's from 0, and where even the gradient's step is short enough.
  let low = full ? newtonCorrection(system, step, scale, radius) : 0;
  const gradient = new Float64Array(size);
  for (let j = 0; j < size; j += 1) {
    let sum = 0;
    for (let i = 0; i <= j; i += 1) sum += data[i * width + j]! * data[i * width + size]!;
    gradient[j] = sum / scale[j]!;
  }
  const slope = norm(gradient);
  let high = slope / radius || Number.MIN_VALUE / Math.min(radius, 0.1);
  let parameter = Math.min(Math.max(guess, low), high);
  if (parameter === 0) parameter = slope / (excess + radius);

  for (let iteration = 1; ; iteration += 1) {
    if (parameter === 0) parameter = Math.max(1e-300, 0.001 * high);
    const damped = dampedSystem(system, scale, Math.sqrt(parameter));
    step = backSubstitute(damped);
    const before = excess;
    excess = scaledNorm(step, scale) - radius;
    const shortAlready = low === 0 && excess <= before && before < 0;
    if (Math.abs(excess) <= 0.1 * radius || shortAlready || iteration === 10) {
      return { step, parameter };
    }
    const correction = newtonCorrection(damped, step, scale, radius);
    if (excess > 0) low = Math.max(low, parameter);
    else high = Math.min(high, parameter);
    parameter = Math.max(low, parameter + correction);
  }
}

function hasFullRank({ size, data }: TriangularSystem): boolean {
  for (let j = 0; j < size; j += 1) if (data[j * (size + 1) + j] === 0) return false;
  return true;
}

/** p = -R^-1 q; unknowns of which nothing is known stay 0. */
function backSubstitute({ size, data }: TriangularSystem): Float64Array {
  const width = size + 1;
  const step = new Float64Array(size);
  for (let j = size - 1; j >= 0; j -= 1) {
    const diagonal = data[j * width + j]!;
    if (diagonal === 0) continue;
    let sum = -data[j * width + size]!;
    for (let k = j + 1; k < size; k += 1) sum -= data[j * width + k]! * step[k]!;
    step[j] = sum / diagonal;
  }
  return step;
}

function scaledNorm(step: Float64Array, scale: Float64Array): number {
  return norm(step.map((value, j) => value * scale[j]!));
}

/** Newton's step for 1 / |D p| = 1 / radius: (|Dp| - radius) / radius / |R^-T D^2 p / |D p||^2. */
function newtonCorrection(
  { size, data }: TriangularSystem,
  step: Float64Array,
  scale: Float64Array,
  radius: number,
): number {
  const width = size + 1;
  const length = scaledNorm(step, scale);
  const w = new Float64Array(size);
  for (let j = 0; j < size; j += 1) {
    let sum = (scale[j]! * (scale[j]! * step[j]!)) / length;
    for (let i = 0; i < j; i += 1) sum -= data[i * width + j]! * w[i]!;
    w[j] = sum / data[j * width + j]!;
  }
  return (length - radius) / radius / norm(w) ** 2;
}

/** R with the rows sqrt(parameter) D added. */
function dampedSystem(
  system: TriangularSystem,
  scale: Float64Array,
  root: number,
): TriangularSystem {
  const { size } = system;
  const damped = createSystem(size);
  damped.data.set(system.data);
  const row = new Float64Array(size + 1);
  for (let j = 0; j < size; j += 1) {
    row.fill(0);
    row[j] = root * scale[j]!;
    addRow(damped, row, j);
  }
  return damped;
}
