import * as fc from "fast-check";
import type { WrittenCell, WrittenColumn, WrittenTable } from "../written-table";

const column = (name: string, kind: WrittenColumn["kind"]) => ({
  name,
  kind,
  unit: null,
  ucd: null,
  description: null,
});

/** Every kind at its ends, and names, units and words that would break a careless writer. */
export const hardTable: WrittenTable = {
  columns: [
    { ...column("id", "text"), ucd: "meta.id;meta.main" },
    { ...column("observedAt", "time"), ucd: "time.epoch", description: "UTC, to 1 ns" },
    {
      ...column("flux [a]", "number"),
      unit: 'W/(m2 "x")',
      description: "a: 'b', {c}\n- \u03b2 <&>",
    },
    { ...column("no", "integer"), unit: "1" },
    column("yes, it is", "boolean"),
    column("# note", "text"),
  ],
  rows: [
    ["#1", "2031-03-01T06:00:00Z", 0.1, 9007199254740991, true, "plain"],
    ["b c", "2016-12-31T23:59:60.25Z", 5e-324, -9007199254740991, false, 'a "b", c'],
    ["c", "1972-01-01T00:00:00.000000001Z", -1.7976931348623157e308, 0, null, "\u03b2 \u{1f319}"],
    ["d", null, null, null, null, null],
    ["e", "2031-12-31T00:00:00.5Z", 1e21, 1, true, "two\nlines"],
    ["f", "2031-12-31T00:00:01Z", -0.5, 2, false, "]]> &amp; <b>"],
  ],
};

const letters = fc.oneof(
  { weight: 3, arbitrary: fc.string({ unit: "grapheme", minLength: 1, maxLength: 12 }) },
  fc
    .array(fc.constantFrom(..."ab #,;:'\"<>&]\\\n\t{}[]-?!|"), { minLength: 1, maxLength: 9 })
    .map((all) => all.join("")),
);
/** Text whose ends aren't layout. */
const text = letters.map((one) => one.trim()).filter((one) => one !== "");

const cells: Record<WrittenColumn["kind"], fc.Arbitrary<WrittenCell>> = {
  text,
  number: fc.double({ noNaN: true, noDefaultInfinity: true }).map((number) => number + 0),
  integer: fc.maxSafeInteger(),
  boolean: fc.boolean(),
  time: fc
    .date({ min: new Date("1972-01-01"), max: new Date("2100-01-01"), noInvalidDate: true })
    .map((date) => date.toISOString()),
};

/** Any table, as a writer takes it. */
export const anyTable: fc.Arbitrary<WrittenTable> = fc
  .uniqueArray(
    fc.record({
      name: text,
      kind: fc.constantFrom<WrittenColumn["kind"][]>(
        "text",
        "number",
        "integer",
        "boolean",
        "time",
      ),
      unit: fc.option(text),
      ucd: fc.option(fc.constantFrom("stat.error", "phot.flux;em.mm")),
      description: fc.option(text.map((one) => one.replaceAll(/\s+/g, " "))),
    }),
    { minLength: 1, maxLength: 10, selector: ({ name }) => name },
  )
  .chain((columns) =>
    fc.record({
      columns: fc.constant(columns),
      rows: fc.array(fc.tuple(...columns.map(({ kind }) => fc.option(cells[kind]))), {
        maxLength: 12,
      }),
    }),
  );
