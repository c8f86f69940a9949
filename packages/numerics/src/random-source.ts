/** Uniform and normal deviates from a seed; the same seed gives the same bytes. */
export interface RandomSource {
  /** In (0, 1), 53 bits. */
  uniform: () => number;
  /** Standard normal. */
  normal: () => number;
  /** Integer in [0, count). */
  below: (count: number) => number;
}

/**
 * xoshiro128**, its 128 bits of state filled from the seed by splitmix32's finaliser; normals by
 * Marsaglia's polar method, which needs no trigonometric function.
 *
 * @param seed any finite number; all 53 bits of an integer count
 * Source: Blackman & Vigna, ACM Trans. Math. Softw. 47 (2021) 36; Marsaglia & Bray, SIAM Review 6
 * (1964) 260. Reference values: random-source.test.ts.
 */
export function randomSource(seed: number): RandomSource {
  const low = seed >>> 0;
  const high = Math.floor(seed / 2 ** 32) >>> 0;
  const state = Uint32Array.from({ length: 4 }, (_, i) =>
    mix(mix(low + 0x9e3779b9 * i) ^ high ^ i),
  );
  if (state.every((word) => word === 0)) state[0] = 1;
  const next = () => nextWord(state);
  const uniform = () => ((next() >>> 5) * 2 ** 26 + (next() >>> 6) + 0.5) / 2 ** 53;
  let spare: number | undefined;
  const normal = () => {
    if (spare !== undefined) {
      const kept = spare;
      spare = undefined;
      return kept;
    }
    for (;;) {
      const a = 2 * uniform() - 1;
      const b = 2 * uniform() - 1;
      const square = a * a + b * b;
      if (square >= 1 || square === 0) continue;
      const scale = Math.sqrt((-2 * Math.log(square)) / square);
      spare = b * scale;
      return a * scale;
    }
  };
  return { uniform, normal, below: (count) => Math.floor(uniform() * count) };
}

/** The generator itself: 32 bits out, `state` (four words, not all 0) moved on. */
export function nextWord(state: Uint32Array): number {
  const word = Math.imul(rotate(Math.imul(state[1]!, 5), 7), 9) >>> 0;
  const carried = state[1]! << 9;
  state[2]! ^= state[0]!;
  state[3]! ^= state[1]!;
  state[1]! ^= state[2]!;
  state[0]! ^= state[3]!;
  state[2]! ^= carried;
  state[3] = rotate(state[3]!, 11);
  return word;
}

function rotate(word: number, by: number): number {
  return ((word << by) | (word >>> (32 - by))) >>> 0;
}

function mix(word: number): number {
  let z = word | 0;
  z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
  z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
  return (z ^ (z >>> 16)) >>> 0;
}
