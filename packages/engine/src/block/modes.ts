import { choleskyFactor } from "@weighhouse/numerics/symmetric-cholesky";

/** A density's logarithm over coordinates within bounds. */
export interface Landscape {
  ln(c: Float64Array): number;
  lower: Float64Array;
  upper: Float64Array;
  /** A first guess of the distance over which it varies. */
  step: Float64Array;
}

export interface Mode {
  centre: Float64Array;
  height: number;
  /** Lower triangular Cholesky factor of the covariance there, row by row. */
  scale: Float64Array;
}

const MOST_ROUNDS = 40;
/** A step that promises less than this in ln isn't worth taking: the peak is for a quadrature. */
const ENOUGH = 1e-4;

/**
 * Climbs from a start to a peak of a density by Newton steps on differences, taken over distances
 * along which the density really varies, and measures its width. At a bound that it rises towards,
 * the width is how far inside it has fallen by half a nat.
 *
 * @returns null where the density is 0 at the start
 */
export function climb(landscape: Landscape, start: Float64Array): Mode | null {
  let centre: Float64Array = start.slice();
  let height = landscape.ln(centre);
  if (!(height > -Infinity)) return null;
  const step = landscape.step.slice();
  for (let round = 0; ; round += 1) {
    const local = quadraticAt(landscape, { centre, height, step });
    const newton = newtonStep(local);
    if (newton.promise < ENOUGH || round >= MOST_ROUNDS) {
      return { centre, height, scale: widthsOf(landscape, { centre, height }, local) };
    }
    const next = searchAlong(landscape, { centre, height, move: newton.move });
    if (next === null || next.height - height < ENOUGH / 10) {
      const at = next ?? { centre, height };
      const last = next === null ? local : quadraticAt(landscape, { ...at, step });
      return { ...at, scale: widthsOf(landscape, at, last) };
    }
    ({ centre, height } = next);
  }
}

interface Place {
  centre: Float64Array;
  height: number;
}

interface Quadratic {
  step: Float64Array;
  gradient: Float64Array;
  /** Minus the second derivatives, in units of the steps. */
  curvature: Float64Array;
  /** Axes at a bound that the density rises towards. */
  held: Uint8Array;
}

function quadraticAt(
  landscape: Landscape,
  { centre, height, step }: Place & { step: Float64Array },
): Quadratic {
  const size = centre.length;
  const gradient = new Float64Array(size);
  const curvature = new Float64Array(size * size);
  const held = new Uint8Array(size);
  const above = new Float64Array(size);
  const x = centre.slice();
  const at = (j: number, value: number) => {
    x[j] = value;
    const ln = landscape.ln(x);
    x[j] = centre[j]!;
    return ln;
  };
  for (let j = 0; j < size; j += 1) {
    const low = landscape.lower[j]!;
    const high = landscape.upper[j]!;
    const most = Math.min((high - low) / 2, 1e6);
    let [up, down] = [0, 0];
    for (let tries = 0; tries < 80; tries += 1) {
      step[j] = Math.min(step[j]!, most);
      // At a bound both differences are taken on the side that there is.
      const right = centre[j]! + step[j]! <= high;
      const left = centre[j]! - step[j]! >= low;
      up = (right ? at(j, centre[j]! + step[j]!) : at(j, centre[j]! - 2 * step[j]!)) - height;
      down = (left ? at(j, centre[j]! - step[j]!) : at(j, centre[j]! + 2 * step[j]!)) - height;
      const change = Math.max(Math.abs(up), Math.abs(down));
      if (!(change < 4)) step[j]! *= change < 64 ? 0.5 : 0.125;
      else if (change < 0.05 && step[j]! < most) step[j]! *= change < 1e-4 ? 8 : 2;
      else {
        if (!right) {
          // up is at -2 steps: the parabola through 0, -1 and -2 gives the point at +1.
          up = 3 * (0 - down) + up;
          held[j] = down < 0 && centre[j] === high ? 1 : 0;
        } else if (!left) {
          down = 3 * (0 - up) + down;
          held[j] = up < 0 && centre[j] === low ? 1 : 0;
        }
        break;
      }
    }
    above[j] = up;
    gradient[j] = (up - down) / 2;
    curvature[j * size + j] = -(up + down);
  }
  addMixed(landscape, { centre, height, step, above }, curvature);
  return { step: step.slice(), gradient, curvature, held };
}

function addMixed(
  landscape: Landscape,
  { centre, height, step, above }: Place & { step: Float64Array; above: Float64Array },
  curvature: Float64Array,
): void {
  const size = centre.length;
  const x = centre.slice();
  const inside = (j: number) => centre[j]! + step[j]! <= landscape.upper[j]!;
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < i; j += 1) {
      if (!inside(i) || !inside(j)) continue;
      x[i] = centre[i]! + step[i]!;
      x[j] = centre[j]! + step[j]!;
      const mixed = landscape.ln(x) - height - above[i]! - above[j]!;
      x[i] = centre[i]!;
      x[j] = centre[j]!;
      if (!Number.isFinite(mixed)) continue;
      curvature[i * size + j] = -mixed;
      curvature[j * size + i] = -mixed;
    }
  }
}

/** ln of the square root of the covariance's determinant. */
export function lnScaleOf({ centre, scale }: Mode): number {
  const size = centre.length;
  let ln = 0;
  for (let j = 0; j < size; j += 1) ln += Math.log(scale[j * size + j]!);
  return ln;
}

/** Whether two peaks are the same: centres within a standard deviation of the first. */
export function isSame(one: Mode, other: Mode): boolean {
  const size = one.centre.length;
  let squares = 0;
  const y = new Float64Array(size);
  for (let i = 0; i < size; i += 1) {
    let rest = other.centre[i]! - one.centre[i]!;
    for (let k = 0; k < i; k += 1) rest -= one.scale[i * size + k]! * y[k]!;
    y[i] = rest / one.scale[i * size + i]!;
    squares += y[i]! * y[i]!;
  }
  return squares < 1;
}

/** Solves curvature move = gradient, with as much added to the diagonal as makes it definite. */
function newtonStep({ step, gradient, curvature, held }: Quadratic) {
  const size = step.length;
  const free = Array.from(step.keys()).filter((j) => held[j] === 0);
  const factor = definite(curvature, size, free);
  const move = new Float64Array(size);
  if (free.length === 0) return { move, promise: 0 };
  const y = Float64Array.from(free, (j) => gradient[j]!);
  const promise = solve(factor, y);
  const longest = Math.max(...y.map(Math.abs), 1e-300);
  const share = Math.min(1, 20 / longest);
  free.forEach((j, c) => (move[j] = share * y[c]! * step[j]!));
  return { move, promise };
}

function definite(curvature: Float64Array, size: number, free: readonly number[]): Float64Array {
  const count = free.length;
  let added = 0;
  for (;;) {
    const matrix = new Float64Array(count * count);
    free.forEach((i, a) => {
      free.forEach((j, b) => (matrix[a * count + b] = curvature[i * size + j]!));
      matrix[a * count + a]! += added;
    });
    const result = choleskyFactor(matrix, count);
    if (result.ok) return result.factor.lower;
    added = added === 0 ? 0.01 : added * 4;
    if (!(added < 1e12))
      return Float64Array.from(matrix, (_, n) => (n % (count + 1) === 0 ? 1 : 0));
  }
}

/** y <- (L L')^-1 y. @returns half of y'(L L')^-1 y: what a step to the top of the parabola gains */
function solve(lower: Float64Array, y: Float64Array): number {
  const size = y.length;
  let promise = 0;
  for (let i = 0; i < size; i += 1) {
    for (let k = 0; k < i; k += 1) y[i]! -= lower[i * size + k]! * y[k]!;
    y[i] = y[i]! / lower[i * size + i]!;
    promise += (y[i]! * y[i]!) / 2;
  }
  for (let i = size - 1; i >= 0; i -= 1) {
    for (let k = i + 1; k < size; k += 1) y[i]! -= lower[k * size + i]! * y[k]!;
    y[i] = y[i]! / lower[i * size + i]!;
  }
  return promise;
}

function searchAlong(
  landscape: Landscape,
  { centre, height, move }: Place & { move: Float64Array },
): Place | null {
  for (let share = 1; share > 1e-6; share *= 0.4) {
    const x = Float64Array.from(centre, (value, j) =>
      Math.min(Math.max(value + share * move[j]!, landscape.lower[j]!), landscape.upper[j]!),
    );
    const ln = landscape.ln(x);
    if (ln > height) return { centre: x, height: ln };
  }
  return null;
}

/** The covariance's Cholesky factor over free axes; widths alone for those held at a bound. */
function widthsOf(landscape: Landscape, place: Place, local: Quadratic): Float64Array {
  const { step, curvature, held } = local;
  const size = step.length;
  const free = Array.from(step.keys()).filter((j) => held[j] === 0);
  const count = free.length;
  const factor = definite(curvature, size, free);
  const inverse = new Float64Array(count * count);
  for (let c = 0; c < count; c += 1) {
    const unit = new Float64Array(count);
    unit[c] = 1;
    solve(factor, unit);
    for (let a = 0; a < count; a += 1) inverse[a * count + c] = unit[a]!;
  }
  const result = choleskyFactor(inverse, count);
  const scale = new Float64Array(size * size);
  free.forEach((i, a) => {
    free.forEach((j, b) => {
      const entry = result.ok ? result.factor.lower[a * count + b]! : a === b ? 1 : 0;
      if (b <= a) scale[i * size + j] = entry * step[i]!;
    });
  });
  for (let j = 0; j < size; j += 1) {
    if (held[j] === 1) scale[j * size + j] = fallWithin(landscape, place, { j, step: step[j]! });
  }
  return scale;
}

function fallWithin(
  landscape: Landscape,
  { centre, height }: Place,
  { j, step }: { j: number; step: number },
): number {
  const side = centre[j] === landscape.upper[j] ? -1 : 1;
  const x = centre.slice();
  let reach = step;
  for (let tries = 0; tries < 60; tries += 1) {
    x[j] = centre[j]! + side * reach;
    const fall = height - landscape.ln(x);
    if (fall > 0.7) reach /= 1.5;
    else if (fall < 0.3 && reach < landscape.upper[j]! - landscape.lower[j]!) reach *= 1.4;
    else break;
  }
  return reach;
}
