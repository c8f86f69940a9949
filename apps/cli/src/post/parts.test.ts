import { describe, expect, test } from "vitest";
import { LineTooLong, PART_BYTES, partsOf } from "./parts";

/** Bytes in chunks of a length that fits neither lines nor parts. */
function* chunked(bytes: Uint8Array, length = 70_001): Generator<Uint8Array> {
  for (let at = 0; at < bytes.length; at += length) yield bytes.subarray(at, at + length);
}

describe("parts of an NDJSON file", () => {
  const line = (index: number) => `{"id":"m-${index}","note":"${"ä".repeat(index % 900)}"}\n`;
  const text = Array.from({ length: 25_000 }, (_, index) => line(index)).join("");
  const bytes = Buffer.from(text);

  test("hold whole lines, at most 8 MiB, and are the file together", () => {
    const parts = [...partsOf(chunked(bytes))];
    expect(parts.length).toBeGreaterThan(2);
    expect(Buffer.concat(parts.map((part) => part.bytes)).equals(bytes)).toBe(true);
    for (const part of parts) {
      expect(part.bytes.length).toBeLessThanOrEqual(PART_BYTES);
      expect(part.bytes.at(-1)).toBe(0x0a);
      const [first = ""] = Buffer.from(part.bytes).toString().split("\n", 1);
      expect(first).toContain(`"m-${part.firstLine - 1}"`);
    }
    expect(parts.map(({ number }) => number)).toEqual(parts.map((_, index) => index + 1));
  });

  test("are the same however the file was read", () => {
    const digests = (length: number) =>
      [...partsOf(chunked(bytes, length))].map(({ sha256 }) => sha256);
    expect(digests(999_983)).toEqual(digests(4096));
  });

  test("a line that fits in none is named", () => {
    const long = Buffer.from(`{}\n{}\n${"x".repeat(PART_BYTES + 1)}\n`);
    const cutting = () => [...partsOf(chunked(long))];
    expect(cutting).toThrow(LineTooLong);
    expect(cutting).toThrow("line 3 is longer");
  });

  test("of a file without a last line end, and of an empty one", () => {
    expect([...partsOf([Buffer.from("{}\n{}")])]).toMatchObject([{ number: 1, firstLine: 1 }]);
    expect([...partsOf([])]).toEqual([]);
  });
});
