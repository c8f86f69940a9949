import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { textPieces } from "./text-pieces";

const folder = mkdtempSync(join(tmpdir(), "weighhouse-pieces-"));
const file = join(folder, "text");
afterAll(() => rmSync(folder, { recursive: true }));

/** Enough for three pieces, and no power of two, so that cuts fall in every place of a letter. */
const LETTERS = 700_001;

describe("a file's text in pieces", () => {
  test.each([
    ["of one byte each", "a"],
    ["of two", "é"],
    ["of three", "日"],
    ["of four", "𝒳"],
    ["of all lengths", "aé日𝒳"],
  ])("is the whole text, letters %s", (_, letters) => {
    const text = `\uFEFF${letters.repeat(Math.ceil(LETTERS / letters.length))}`;
    writeFileSync(file, text);
    const pieces = [...textPieces(file)];
    expect(pieces.length).toBeGreaterThan(1);
    expect(pieces.join("") === text).toBe(true);
    expect(pieces.some((piece) => piece.includes("\uFFFD"))).toBe(false);
  });

  test("ends where it isn't UTF-8", () => {
    for (const bytes of [[0x80], [0xc3], [0x41, 0x80], [0xe6, 0x97], [0xff]]) {
      writeFileSync(file, Uint8Array.from([...bytes, 0x41]));
      expect(() => [...textPieces(file)]).toThrow(TypeError);
    }
  });

  test("of nothing is nothing", () => {
    writeFileSync(file, "");
    expect([...textPieces(file)].join("")).toBe("");
  });
});
