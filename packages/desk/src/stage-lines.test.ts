import { expect, it } from "vitest";
import * as fc from "fast-check";
import { LONGEST_LINE, linePieces } from "./stage-lines";
import type { ReadRow } from "./read-rows";

async function* chunks(bytes: Uint8Array, sizes: number[]): AsyncGenerator<Uint8Array> {
  let [at, turn] = [0, 0];
  while (at < bytes.length) {
    const size = sizes[turn % sizes.length] ?? bytes.length;
    yield bytes.subarray(at, at + size);
    at += size;
    turn += 1;
  }
}

async function rowsOf(given: string | Uint8Array, sizes: number[] = []): Promise<ReadRow[]> {
  const bytes = typeof given === "string" ? Buffer.from(given) : given;
  const rows: ReadRow[] = [];
  for await (const piece of linePieces(chunks(bytes, sizes))) rows.push(...piece.rows);
  return rows;
}

const line = (id: string, more = "") => `{"id":"${id}","measurand":"pitch","value":1${more}}`;

it("lines are rows, however the bytes are cut: blank ones, CRLF and a byte order mark too", async () => {
  const source = "Größe ✓ 𝄞";
  const text = `\uFEFF${line("a")}\r\n\n${line("b", `,"source":"${source}"`)}\n  \n{"value":2}\n${line("c")}`;
  const whole = await rowsOf(text);
  expect(whole.map((row) => [row.line, row.draft?.["id"] ?? null])).toEqual([
    [1, "a"],
    [3, "b"],
    [5, null],
    [6, "c"],
  ]);
  expect(whole[1]?.draft?.["source"]).toBe(source);
  await fc.assert(
    fc.asyncProperty(fc.array(fc.integer({ min: 1, max: 40 }), { minLength: 1 }), async (sizes) => {
      expect(await rowsOf(text, sizes)).toEqual(whole);
    }),
    { numRuns: 50 },
  );
});

it.each([
  ["no JSON", "{,}", /"," at column 2/],
  ["a member twice", '{"value":1,"value":2}', /"value" a second time/],
  ["a list", "[1]", /^a list$/],
  ["two values", `${line("a")} ${line("b")}`, /at column/],
  ["U+0000", '{"id":"a\u0000"}', /U\+0000/],
])(
  "a line that is %s is a row refused, with its number and what was found",
  async (_, bad, found) => {
    const rows = await rowsOf(`${line("a")}\n${bad}\n${line("c")}\n`);
    expect(rows.map(({ draft }) => draft !== null)).toEqual([true, false, true]);
    expect(rows[1]).toMatchObject({ line: 2, problems: [{ column: null }] });
    expect(rows[1]?.problems[0]?.found).toMatch(found);
  },
);

it("bytes that are not UTF-8 are told at their line, the others are read", async () => {
  const bytes = Buffer.concat([
    Buffer.from(`${line("a")}\n`),
    Buffer.from([0x7b, 0xff, 0x7d, 10]),
    Buffer.from(`${line("c")}\n`),
  ]);
  const rows = await rowsOf(bytes, [7]);
  expect(rows.map((row) => [row.line, row.problems[0]?.found ?? null])).toEqual([
    [1, null],
    [2, "bytes that are not UTF-8"],
    [3, null],
  ]);
});

it("UTF-16 is told as what it is not", async () => {
  const rows = await rowsOf(Buffer.from(`${line("a")}\n`, "utf16le"));
  expect(rows[0]?.problems[0]?.found).toMatch(/U\+0000|not UTF-8/);
});

it("a line without an end is refused once it is too long, and no more of it is read", async () => {
  let pulled = 0;
  async function* endless(): AsyncGenerator<Uint8Array> {
    yield Buffer.from(`${line("a")}\n`);
    for (;;) {
      pulled += 65_536;
      yield new Uint8Array(65_536).fill(0x20);
    }
  }
  const rows: ReadRow[] = [];
  for await (const piece of linePieces(endless())) rows.push(...piece.rows);
  expect(rows).toHaveLength(2);
  expect(rows[1]).toMatchObject({
    line: 2,
    problems: [{ found: `a line longer than ${LONGEST_LINE} bytes` }],
  });
  expect(pulled).toBeLessThanOrEqual(LONGEST_LINE + 131_072);
});
