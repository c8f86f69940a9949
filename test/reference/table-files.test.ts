import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { draftsOf } from "@weighhouse/tables/drafts";
import { matchColumns } from "@weighhouse/tables/match-columns";
import { readTable } from "@weighhouse/tables/read-table";
import { oneQuantity } from "@weighhouse/tables/testing/harbour";
import type { TableChoices } from "@weighhouse/tables/table-match";

// Files written by astropy 5.2.1 itself, with what it holds of them: see test/reference/README.md.
function read(name: string, choices: Partial<TableChoices> = {}) {
  const table = readTable(name, readFileSync(new URL(`tables/files/${name}`, import.meta.url)));
  const context = { document: oneQuantity };
  const matches = matchColumns(table, context, choices);
  return { table, matches, ...draftsOf(table, matches, context, choices) };
}

const nightly = [
  "nightly.ecsv",
  "nightly-comma.ecsv",
  "nightly-tabledata.vot",
  "nightly-binary2.vot",
];

/** VOTables of these name no time system: that the times are UTC has to be chosen. */
const utc = { times: { obs_time: { format: "iso", scale: "utc", offset: 0 } } } as const;

test("times of a VOTable without a time system are asked about", () => {
  expect(read("nightly-binary2.vot").problems).toMatchObject([
    { column: "obs_time", found: '"2031-03-01T00:15:30.250", without a zone' },
  ]);
});

describe.each(nightly)("%s, columns matched without help", (name) => {
  const { matches, rows, problems } = read(name, name.endsWith(".vot") ? utc : {});
  const fieldOf = (column: string) => matches.find((match) => match.column === column)?.field;

  test("columns by name, unit and pairing", () => {
    expect(problems).toEqual([]);
    expect(
      ["id", "obs_time", "flux", "e_flux", "err_up", "err_lo", "l_flux", "sigmas"].map(fieldOf),
    ).toEqual(["id", "observedAt", "value", "sd", "plus", "minus", "limit", "sigmas"]);
  });

  test("masked cells are absent, values, limits and asymmetric errors as astropy has them", () => {
    const [first, below, , sides, upper, lower] = rows.map(({ draft }) => draft);
    expect(first).toMatchObject({ value: 12.5, sd: 0.5, unit: "Jy" });
    expect(first).not.toHaveProperty("plus");
    expect(first?.observedAt).toMatch(/^2031-03-01T00:15:30\.250*Z$/);
    expect(below).toMatchObject({ value: -0.25, sd: 0.125 });
    expect(sides).toMatchObject({ value: 1 / 3, plus: 0.1, minus: 0.05 });
    expect(upper).toMatchObject({ value: 20, limit: "upper", sigmas: 3 });
    // Masked in the file: a limit flag without its value.
    expect(lower).toBeNull();
    expect(rows.at(-1)?.problems).toMatchObject([{ column: "flux", allowed: "a value" }]);
  });
});

// times.json has the same instants; here they come through files with a declared time system.
test("declared time systems are followed: UTC at the observer before others", () => {
  const { matches, rows } = read("time-systems.vot");
  expect(matches.map(({ column, field }) => [column, field])).toEqual([
    ["mjd", "extra"],
    ["jd", "extra"],
    ["own", "observedAt"],
    ["iso", "extra"],
    ["value", "value"],
  ]);
  // The origin 2455197.5 is 2010-01-01.
  expect(rows.map(({ draft }) => draft?.observedAt)).toEqual([
    "2010-01-02T12:00:00Z",
    "2010-01-03T06:00:00Z",
  ]);
});
