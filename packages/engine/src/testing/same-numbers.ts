import { expect } from "vitest";

/**
 * All numbers of two results alike, texts and words the same.
 *
 * @param allowed of their size, or of 1 where they are smaller
 */
export function expectSame(found: unknown, expected: unknown, allowed = 1e-9, path = ""): void {
  if (typeof found === "number" && typeof expected === "number") {
    const most = allowed * Math.max(1, Math.abs(expected));
    expect(Math.abs(found - expected), path).toBeLessThanOrEqual(most);
  } else if (found !== null && typeof found === "object") {
    expect(Object.keys(found), path).toEqual(Object.keys(expected as object));
    for (const [key, value] of Object.entries(found)) {
      const there = (expected as Record<string, unknown>)[key];
      expectSame(value, there, allowed, `${path}/${key}`);
    }
  } else expect(found, path).toBe(expected);
}
