import { describe, expect, it } from "vitest";
import type { Measurement } from "@weighhouse/campaign/document";
import { measurementSchema } from "@weighhouse/campaign/measurement";
import { draftsOf } from "./drafts";
import { matchColumns } from "./match-columns";
import { measurementTable } from "./measurement-table";
import { readTable } from "./read-table";
import { manyQuantities } from "./testing/harbour";
import { writeEcsv } from "./write-ecsv";
import { writeTableCsv } from "./write-table-csv";
import { writeVotable } from "./write-votable";

const one = (given: object): Measurement => measurementSchema.parse(given);
const inMay = { measurand: "flux-may", observedAt: "2031-05-04T11:20:00Z", facility: "north-raft" };

/** Invented; every field of the format, among them. */
const everything = [
  one({
    ...inMay,
    id: "raft:1",
    value: 8.1,
    sd: 0.6,
    batch: "2031-05-04",
    conditions: { depth: 12 },
  }),
  one({ ...inMay, id: "raft:2", value: 4.4, plus: 0.5, minus: 0.3, status: "provisional" }),
  one({
    ...inMay,
    id: "raft:3",
    value: 20,
    limit: "upper",
    confidence: 0.95,
    source: "doi:10.0/x",
  }),
  one({
    ...inMay,
    id: "raft:4",
    value: 20,
    limit: "lower",
    sigmas: 3,
    knownSince: "2031-05-03T00:00:00.5Z",
  }),
  one({ ...inMay, id: "raft:5", value: -0.4, sd: 1, noise: "linear", sameData: "plate-7" }),
  one({
    ...inMay,
    id: "raft:6",
    value: 0.93,
    team: "deep",
    setAside: { reason: 'no uncertainty given; "later", they say' },
    extra: { filter: "B", airmass: 1.25, clouds: true, grade: 1 },
  }),
  one({
    ...inMay,
    id: "raft:7",
    value: 1e-7,
    sd: 1e-8,
    shared: [{ error: "zero-point" }, { error: "scale", coefficient: -0.5 }],
    extra: { filter: "V, wide", airmass: null, grade: "A" },
  }),
];

const otherResults = [
  one({ id: "p:1", measurand: "plume-may", observedAt: "2031-05-04T00:00:00Z", occurred: true }),
  one({
    id: "p:2",
    measurand: "plume-may",
    observedAt: "2031-05-05T00:00:00Z",
    occurred: false,
    efficiency: 0.9,
    falseAlarm: 0.02,
  }),
  one({
    id: "t:1",
    measurand: "tremors-may",
    observedAt: "2031-05-05T00:00:00Z",
    count: 6,
    exposure: 2,
    background: 0.5,
  }),
  one({
    id: "g:1",
    measurand: "glow-may",
    observedAt: "2031-05-05T00:00:00Z",
    value: 22.4,
    limit: "fainter",
    sigmas: 5,
  }),
  one({ id: "l:1", measurand: "level-now", value: 3, sdDex: 0.1 }),
];

/** Names that a reader would take for something else. */
const claimed = one({
  ...inMay,
  id: "raft:8",
  value: 1,
  sd: 1,
  extra: {
    e_flux: 1,
    error: 2,
    JD: 3,
    date: "4 May",
    "seeing [arcsec]": 5,
    "flux (B)": 6,
    "extra.a": 7,
    flux: 8,
    glow: 9,
    noise: "dark",
  },
});

const ways: [way: string, write: (table: ReturnType<typeof measurementTable>) => string][] = [
  ["CSV", writeTableCsv],
  ["ECSV", writeEcsv],
  ["TABLEDATA", (table) => writeVotable(table, { serialization: "TABLEDATA" })],
  ["BINARY2", (table) => writeVotable(table, { serialization: "BINARY2" })],
];

describe.each(ways)("what is measured, written as %s and read", (_, write) => {
  const readBack = (measurements: readonly Measurement[]) => {
    const file = new TextEncoder().encode(write(measurementTable(measurements, manyQuantities)));
    const table = readTable("table", file);
    const context = { document: manyQuantities, defaults: {} };
    const drafts = draftsOf(table, matchColumns(table, context, {}), context, {});
    expect(drafts.problems).toEqual([]);
    expect(drafts.rows.flatMap(({ problems }) => problems)).toEqual([]);
    return drafts.rows.map(({ draft }) => measurementSchema.parse(draft));
  };

  it("is the same again, but for the unit that is said", () => {
    expect(readBack(everything)).toEqual(
      everything.map((measurement) => ({
        ...measurement,
        unit: "Jy",
        extra: withoutNull(measurement.extra),
      })),
    );
  });

  it("is the same again under whatever names its extras have", () => {
    expect(readBack([claimed])).toEqual([{ ...claimed, unit: "Jy" }]);
  });

  it("in units of its own where there are several, events and counts among them", () => {
    const read = readBack([...everything.slice(0, 2), ...otherResults]);
    expect(read.map(({ unit }) => unit)).toEqual(["Jy", "Jy", null, null, null, "mag", "m"]);
    expect(read.map((measurement) => ({ ...measurement, unit: null }))).toEqual([
      ...everything.slice(0, 2),
      ...otherResults,
    ]);
  });
});

function withoutNull(extra: Measurement["extra"]): Measurement["extra"] {
  return Object.fromEntries(Object.entries(extra).filter(([, value]) => value !== null));
}

it("only fields that something is in are columns, after the keys", () => {
  const { columns } = measurementTable([everything[0]!], manyQuantities);
  expect(columns.map(({ name, unit }) => (unit === null ? name : `${name} [${unit}]`))).toEqual([
    "id",
    "measurand",
    "facility",
    "batch",
    "observedAt",
    "value [Jy]",
    "sd [Jy]",
    "depth [m]",
  ]);
  expect(measurementTable([], manyQuantities).columns).toHaveLength(2);
});

it("an extra that is called as a field is, is told apart", () => {
  const [measurement] = everything;
  const { columns } = measurementTable(
    [{ ...measurement!, extra: { SD: 1, other: 2 } }],
    manyQuantities,
  );
  expect(columns.slice(-2).map(({ name }) => name)).toEqual(["extra.SD", "other"]);
});
