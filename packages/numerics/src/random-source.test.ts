import { expect, test } from "vitest";
import { nextWord, randomSource } from "./random-source";

test("the generator's words from the state 1, 2, 3, 4 are those of xoshiro128**", () => {
  // Computed with Python's unbounded integers from Blackman & Vigna's definition; the first by
  // hand: rotl(2 * 5, 7) * 9 = 11520, and then s1 = 0.
  const state = Uint32Array.of(1, 2, 3, 4);
  const words = Array.from({ length: 6 }, () => nextWord(state));
  expect(words).toEqual([11520, 0, 5927040, 70819200, 2031721883, 1637235492]);
});

test("uniforms and normals have the moments of theirs", () => {
  const random = randomSource(42);
  const count = 20_000;
  let inside = true;
  let sum = 0;
  let squares = 0;
  let normals = 0;
  let normalSquares = 0;
  for (let i = 0; i < count; i += 1) {
    const x = random.uniform();
    inside &&= x > 0 && x < 1;
    sum += x;
    squares += x * x;
    const z = random.normal();
    normals += z;
    normalSquares += z * z;
  }
  expect(inside).toBe(true);
  // Within four standard errors: sd of x is 0.289, of x^2 0.298, of z 1, of z^2 the root of 2.
  const bound = 4 / Math.sqrt(count);
  expect(Math.abs(sum / count - 1 / 2)).toBeLessThan(0.289 * bound);
  expect(Math.abs(squares / count - 1 / 3)).toBeLessThan(0.298 * bound);
  expect(Math.abs(normals / count)).toBeLessThan(bound);
  expect(Math.abs(normalSquares / count - 1)).toBeLessThan(Math.SQRT2 * bound);
});

test("seeds that differ anywhere in 53 bits give other numbers", () => {
  const first = [0, 1, 2, -1, 2 ** 32, 2 ** 52, 2 ** 52 + 1].map((seed) =>
    randomSource(seed).uniform(),
  );
  expect(new Set(first).size).toBe(first.length);
});
