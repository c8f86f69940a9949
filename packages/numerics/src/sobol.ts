import { NumericsError } from "./numerics-error";
import table from "./sobol-directions.json";

const BITS = 32;

/**
 * Points of the unscrambled Sobol sequence, in the order of the Gray code, each coordinate a multiple
 * of 2^-32 in [0, 1). Point 0 is the origin. Among the points [0, 2^k) each coordinate takes every
 * multiple of 2^-k once.
 *
 * @param dimension 1 to 64
 * @param count how many
 * @param skip index of the first one
 * @returns `count` rows of `dimension` numbers
 * @throws {NumericsError} `out-of-domain` for another dimension, or indices beyond 2^32
 * Source: I. A. Antonov & V. M. Saleev (1979); direction numbers of S. Joe & F. Y. Kuo, SIAM J. Sci.
 * Comput. 30 (2008) 2635. Reference values: fixtures/sobol-points.json (scipy), exact.
 */
export function sobolPoints(dimension: number, count: number, skip = 0): Float64Array {
  checkRange(dimension, count, skip);
  const directions = table.rows.slice(0, dimension).map(directionNumbers);
  const points = new Float64Array(dimension * count);
  for (let j = 0; j < dimension; j += 1) {
    const v = directions[j]!;
    let state = stateAt(v, skip);
    for (let i = 0; i < count; i += 1) {
      points[i * dimension + j] = (state >>> 0) * 2 ** -BITS;
      // From one index to the next, the Gray code changes the bit of the index's lowest 0.
      state ^= v[31 - Math.clz32(~(skip + i) & (skip + i + 1))]!;
    }
  }
  return points;
}

function checkRange(dimension: number, count: number, skip: number): void {
  if (!(Number.isInteger(dimension) && dimension >= 1 && dimension <= table.rows.length)) {
    throw new NumericsError(
      "out-of-domain",
      `Sobol points have 1 to ${table.rows.length} dimensions; found ${dimension}`,
    );
  }
  const whole = Number.isInteger(count) && Number.isInteger(skip) && count >= 0 && skip >= 0;
  if (!whole || skip + count > 2 ** BITS) {
    throw new NumericsError(
      "out-of-domain",
      `Sobol points run from 0 to 2^${BITS}; found ${count} from ${skip} on`,
    );
  }
}

/**
 * v_k = m_k 2^(32 - k), where m_k = 2 a_1 m_(k-1) xor ... xor 2^s m_(k-s) xor m_(k-s) for the
 * primitive polynomial x^s + a_1 x^(s-1) + ... + 1. The first dimension's m are all 1.
 */
function directionNumbers([polynomial, ...initial]: number[]): Int32Array {
  const degree = 31 - Math.clz32(polynomial!);
  const v = new Int32Array(BITS);
  for (let k = 0; k < BITS; k += 1) {
    if (degree === 0) v[k] = 1 << (BITS - 1 - k);
    else if (k < degree) v[k] = initial[k]! << (BITS - 1 - k);
    else {
      let next = v[k - degree]! ^ (v[k - degree]! >>> degree);
      for (let i = 1; i < degree; i += 1) {
        if ((polynomial! >> (degree - i)) & 1) next ^= v[k - i]!;
      }
      v[k] = next;
    }
  }
  return v;
}

function stateAt(v: Int32Array, index: number): number {
  const gray = index ^ (index >>> 1);
  let state = 0;
  for (let k = 0; k < BITS; k += 1) if ((gray >>> k) & 1) state ^= v[k]!;
  return state;
}
