import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readEcsv } from "./ecsv";
import { MAX_CHARACTERS } from "./limits";
import { mutated } from "./testing/mutations";
import { expectSound } from "./testing/sound-table";
import { bytesOf, tableFiles } from "./testing/table-files";

const decoded = (bytes: Uint8Array) => new TextDecoder().decode(bytes);
const header = (yaml: string) =>
  `# %ECSV 1.0\n# ---\n${yaml
    .split("\n")
    .map((line) => `# ${line}\n`)
    .join("")}a\n1\n`;
const withMeta = (meta: string) => header(`datatype:\n- {name: a, datatype: int8}\nmeta: ${meta}`);

describe("a header that would take the machine is refused at once", () => {
  const laughs = ["&a [x,x,x,x,x,x,x,x,x]"];
  for (const [before, name] of ["ab", "bc", "cd", "de", "ef", "fg", "gh"].map((two) => [...two])) {
    laughs.push(`&${name} [${Array(9).fill(`*${before}`).join(",")}]`);
  }
  const bombs: [name: string, text: string, found: RegExp][] = [
    ["aliases of aliases", withMeta(`\n- ${laughs.join("\n- ")}`), /Excessive alias count/],
    ["brackets in brackets", withMeta("[".repeat(100_000)), /nested more than 40/],
    ["brackets on lines of their own", withMeta("\n  [".repeat(50_000)), /nested more than 40/],
    ["brackets closed in quotes", withMeta('["]", '.repeat(500)), /nested more than 40/],
    ["maps in maps", withMeta("{a: ".repeat(1000)), /nested more than 40/],
    ["lists in lists", withMeta(`\n${"- ".repeat(50_000)}x`), /nested more than 40/],
    ["keys of keys", withMeta(`\n${"? ".repeat(50_000)}x`), /nested more than 40/],
    ["values of values", withMeta("a: ".repeat(10_000)), /nested more than 40/],
    [
      "indents in indents",
      withMeta(`\n${Array.from({ length: 500 }, (_, n) => `${" ".repeat(n + 1)}a:`).join("\n")}`),
      /indented by/,
    ],
    ["too many keys", withMeta(`\n${"  k: v\n".repeat(20_000)}`), /more than 60000 YAML tokens/],
    [
      "a megabyte of text",
      withMeta(`\n- ${"x".repeat(999)}`.repeat(1000)),
      /a header of \d+ characters/,
    ],
    ["anchors", withMeta(`${"&a ".repeat(100_000)}x`), /more than 60000 YAML tokens/],
  ];
  it.each(bombs)("%s", (_, text, found) => {
    const [problem] = readEcsv(text).problems;
    expect(problem?.found).toMatch(found);
  });

  it("a column cannot be called into the language's own objects", () => {
    const text = withMeta(
      "{__serialized_columns__: {__proto__: {__class__: Time, value: {name: constructor}}}}",
    );
    expect(readEcsv(text).problems).toMatchObject([{ column: "constructor" }]);
    expect(Object.keys(Object.prototype)).toEqual([]);
  });

  it("a part of itself ends", () => {
    const text = withMeta("{__serialized_columns__: {t: &t {__class__: Time, value: *t}}}");
    expectSound(readEcsv(text));
  });
});

it("a text past the limit is refused before anything of it is read", () => {
  const [problem] = readEcsv("x".repeat(MAX_CHARACTERS + 1)).problems;
  expect(problem).toMatchObject({ found: `${MAX_CHARACTERS + 1} characters` });
});

it("files in UTF-16 or Latin-1 are refused, not misread", () => {
  const text = decoded(bytesOf("nightly.ecsv"));
  const utf16 = new Uint8Array(new Uint16Array([...text].map((one) => one.charCodeAt(0))).buffer);
  expect(readEcsv(decoded(utf16)).problems[0]?.found).toMatch(/NUL|lost in decoding/);
  const latin1 = bytesOf("nightly.ecsv").map((byte) => (byte > 127 ? 0xe9 : byte));
  expect(readEcsv(decoded(latin1)).problems[0]).toMatchObject({
    found: "a character that was lost in decoding (U+FFFD)",
  });
});

it("changed files of astropy's give problems, or numbers that stand in the row's own text", () => {
  const files = tableFiles(".ecsv")
    .filter((name) => !name.startsWith("times."))
    .map(bytesOf);
  fc.assert(
    fc.property(mutated(files), (bytes) => {
      const text = decoded(bytes);
      const table = readEcsv(text);
      expectSound(table);
      const lines = text.split(/\r\n|\n|\r/);
      for (const { line, cells } of table.rows) {
        const numbers = new Set(lines[line - 1]?.split(/[ ,"\t]+/).map(Number));
        for (const [index, cell] of cells.entries()) {
          // A row may go on below its first line, and two-part times are sums.
          if (typeof cell === "number" && index < 6) expect(numbers).toContain(cell);
        }
      }
    }),
    { numRuns: 300, seed: 1 },
  );
});

it("any text behind an ECSV header is read or refused", () => {
  const anyText = fc.oneof(
    fc.string({ unit: "binary", maxLength: 200 }),
    fc
      .array(
        fc.constantFrom("a", "1", " ", ",", '"', "\n", "\r", "#", "# ", "-", ":", "[", "{", "}"),
      )
      .map((letters) => letters.join("")),
  );
  fc.assert(
    fc.property(anyText, anyText, (yaml, body) => {
      expectSound(readEcsv(`# %ECSV 1.0\n# ---\n# ${yaml}\n${body}`));
      expectSound(readEcsv(withMeta(yaml)));
      expectSound(
        readEcsv(`# %ECSV 1.0\n# ---\n# datatype: [{name: a, datatype: string}]\na\n${body}`),
      );
    }),
    { numRuns: 150, seed: 2 },
  );
});
