import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { Measurement } from "@weighhouse/campaign/document";
import { measurementSchema } from "@weighhouse/campaign/measurement";
import { draftsOf } from "./drafts";
import { matchColumns } from "./match-columns";
import { measurementTable } from "./measurement-table";
import { readTable } from "./read-table";
import { manyQuantities, readDrafts } from "./testing/harbour";
import { readTime } from "./times/read-time";
import { writeNdjson } from "./write-ndjson";
import { writeTableCsv } from "./write-table-csv";

const number = fc.double({ noNaN: true, noDefaultInfinity: true });
const positive = fc.double({ min: 1e-300, max: 1e300, noNaN: true });
// White space at a text's ends, and marks of missing cells, are lost in CSV; numbers and truths
// kept as text come back as such.
const text = fc
  .string({ unit: fc.constantFrom("a", "b", ",", ";", '"', "\n", "\t", "|", "#", "é", "🌙") })
  .map((inner) => `x${inner}x`);
const time = fc
  .date({ min: new Date("2031-05-01T00:00:00Z"), max: new Date("2031-05-31T00:00:00Z") })
  .filter((date) => !Number.isNaN(date.getTime()))
  .map((date) => date.toISOString());

const result = fc.oneof(
  fc.record({ value: number, sd: positive }),
  fc.record({ value: number, plus: positive, minus: positive }),
  fc.record({
    value: number,
    limit: fc.constantFrom("upper" as const, "lower" as const),
    confidence: fc.double({ min: 0.51, max: 0.99, noNaN: true }),
  }),
);
const measurement: fc.Arbitrary<Measurement> = fc
  .record({
    id: fc.stringMatching(/^[A-Za-z0-9._:-]{1,20}$/),
    observedAt: time,
    batch: fc.option(text),
    source: fc.option(text),
    conditions: fc.record({ depth: number }, { requiredKeys: [] }),
    extra: fc.dictionary(
      fc.constantFrom("filter", "seeing", "error", "JD", "e_flux", "flux (B)"),
      fc.oneof(text, number),
      { maxKeys: 3 },
    ),
    result,
  })
  .map(({ result: fields, ...rest }) =>
    measurementSchema.parse({ ...rest, ...fields, measurand: "flux-may", unit: "Jy" }),
  );
// One kind for a column: mixed ones are written as text.
const alike = (measurements: Measurement[]) => {
  const kinds = new Map<string, string>();
  return measurements.map((one) => ({
    ...one,
    extra: Object.fromEntries(
      Object.entries(one.extra).filter(([name, value]) => {
        if (!kinds.has(name)) kinds.set(name, typeof value);
        return kinds.get(name) === typeof value;
      }),
    ),
  }));
};
const several = fc.array(measurement, { minLength: 1, maxLength: 8 }).map(alike);

function back(file: string): Measurement[] {
  const read = readDrafts(file, { document: manyQuantities });
  expect(read.problems).toEqual([]);
  expect(read.rows.flatMap(({ problems }) => problems)).toEqual([]);
  return read.rows.map(({ draft }) => measurementSchema.parse(draft));
}

/** A double has one zero for a ledger: canonical JSON writes -0 as 0. */
const withoutSign = (measurements: Measurement[]) =>
  JSON.parse(JSON.stringify(measurements)) as Measurement[];

describe("what is written is read back the same", () => {
  test("as CSV", () => {
    fc.assert(
      fc.property(several, (measurements) => {
        const file = writeTableCsv(measurementTable(measurements, manyQuantities));
        expect(withoutSign(back(file))).toEqual(withoutSign(measurements));
      }),
      { numRuns: 200 },
    );
  });

  test("as NDJSON", () => {
    fc.assert(
      fc.property(several, (measurements) => {
        expect(withoutSign(back(writeNdjson(measurements)))).toEqual(withoutSign(measurements));
      }),
      { numRuns: 100 },
    );
  });
});

describe("whatever bytes come, there are drafts or problems with words", () => {
  const judge = (file: Uint8Array) => {
    const table = readTable("file", file);
    const context = { document: manyQuantities };
    const matches = matchColumns(table, context);
    const { rows, problems } = draftsOf(table, matches, context);
    for (const problem of [...problems, ...rows.flatMap((row) => row.problems)]) {
      expect(problem.found).not.toBe("");
      expect(problem.allowed).not.toBe("");
    }
    for (const { draft, problems: faults } of rows) {
      expect(draft === null).toBe(faults.length > 0);
    }
    return { rows, problems };
  };

  test("bytes of any kind", () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 200 }), (file) => void judge(file)),
      { numRuns: 300 },
    );
  });

  test("texts that look like tables", () => {
    const piece = fc.constantFrom(
      ...'value,sd;flux|e_flux\tl_flux|JD|MJD (TT)|date|[Jy]|(mag)|\n|\r\n|"|#|<8,1|8.1|-|nan|1e5|±|{|}|[|:|true|null|Z|2031-05-04T00:00:00Z|glow|id|measurand|flux-may|extra.x|__proto__|constructor'.split(
        "|",
      ),
      ",",
      "|",
    );
    const table = fc.array(piece, { maxLength: 60 }).map((pieces) => pieces.join(""));
    fc.assert(
      fc.property(table, (file) => void judge(new TextEncoder().encode(file))),
      { numRuns: 500 },
    );
  });

  const sound =
    "# night 4\nid;date-obs;flux [mJy];e_flux;l_flux;sigmas;depth [m];filter\n" +
    "a;2031-05-04T11:20:00;8100,5;600;;;12;B\n" +
    "b;2031-05-05T11:20:00;20,25;;<;3;14;V\n" +
    'c;2031-05-06T11:20:00;-0,4;1,5;;;16,5;"R; wide"\n';
  const meant = readDrafts(sound, { document: manyQuantities });

  test("a sound table is read as meant", () => {
    expect(meant.rows.map(({ draft }) => [draft?.id, draft?.value, draft?.sd])).toEqual([
      ["a", 8100.5, 600],
      ["b", 20.25, undefined],
      ["c", -0.4, 1.5],
    ]);
  });

  test("and with a letter changed, left out or put in, no number comes about that isn't there", () => {
    const change = fc.record({
      at: fc.nat(sound.length - 1),
      length: fc.constantFrom(0, 1, 1, 2),
      with: fc.constantFrom("", ";", ",", ".", "\n", '"', "<", "e", "-", "#", " ", "\0", "9"),
    });
    fc.assert(
      fc.property(change, ({ at, length, with: put }) => {
        const mutated = sound.slice(0, at) + put + sound.slice(at + length);
        const { rows } = judge(new TextEncoder().encode(mutated));
        // Read once more by JavaScript's own rules for numbers.
        const cells = mutated.split(/[;\n"<>]/);
        const numbers = cells.map((cell) => Number(cell.trim().replace(",", ".")));
        for (const { draft } of rows) {
          for (const value of [draft?.value, draft?.sd, draft?.conditions?.["depth"]]) {
            if (typeof value !== "number") continue;
            expect(numbers, JSON.stringify(mutated)).toContain(value);
          }
        }
      }),
      { numRuns: 400 },
    );
  });
});

test("whatever text a time's cell holds, it is a time or refused", () => {
  const cell = fc.oneof(
    fc.string(),
    number.map(String),
    fc.stringMatching(/^\d{4}-\d{2}-\d{2}[T ]\d{2}:\d{2}:\d{2}(\.\d{1,12})?Z?$/),
  );
  const reading = fc.record({
    format: fc.constantFrom("iso" as const, "jd" as const, "mjd" as const),
    scale: fc.constantFrom("utc" as const, "tt" as const, "tai" as const, "tdb" as const),
    offset: number,
  });
  fc.assert(
    fc.property(cell, fc.option(reading), (text, how) => {
      const read = readTime(text, how);
      if (!read.ok) expect(read.allowed).not.toBe("");
      else expect(read.time).toMatch(/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}(?:\.\d{1,9})?Z$/);
    }),
    { numRuns: 2000 },
  );
});
