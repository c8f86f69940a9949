import { expect, it } from "vitest";
import { OneByte } from "./testing/one-byte";
import { generator } from "./testing/generator";
import { verify } from "./testing/verify-marsh";

const one = new OneByte();

it("a small archive is good, and within 32 kB", () => {
  expect(verify(one.archive).ok).toBe(true);
  expect(one.archive.length).toBeLessThanOrEqual(32_768);
});

it("one byte changed anywhere in an archive is found, or is one that carries no content", () => {
  const random = generator(20310201);
  const fates = { found: 0, harmless: 0, missed: 0 };
  for (let round = 0; round < 2000; round += 1) {
    const at = random(one.archive.length);
    const { fate, field } = one.change(at, 1 + random(255));
    fates[fate] += 1;
    expect(fate, `byte ${at}, ${field}`).not.toBe("missed");
  }
  // Some seventeen bytes of a file's two headers, of some seven hundred.
  expect(fates.harmless).toBeGreaterThan(0);
  expect(fates.harmless).toBeLessThan(100);
});
