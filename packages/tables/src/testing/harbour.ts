import { draftsOf } from "../drafts";
import type { Drafts } from "../drafts";
import { matchColumns } from "../match-columns";
import { readText } from "../read-table";
import type { ColumnMatch, TableChoices, TableContext } from "../table-match";

const observable = (
  key: string,
  unit: string | null,
  scale: string,
  conditions: object[] = [],
) => ({
  key,
  title: key.replaceAll("-", " "),
  unit,
  scale,
  period: null,
  conditions,
});
const measurand = (key: string, of: string, more: object = {}) => ({
  key,
  observable: of,
  title: key,
  window: { from: null, to: null },
  where: {},
  shape: "constant",
  closed: null,
  ...more,
});
const depth = { key: "depth", title: "Depth", unit: "m", time: null };
const inMay = { window: { from: "2031-05-01T00:00:00Z", to: "2031-06-01T00:00:00Z" } };
const inJune = { window: { from: "2031-06-01T00:00:01Z", to: "2031-07-01T00:00:00Z" } };

function contextOf(observables: object[], measurands: object[]): TableContext["document"] {
  const facilities = [{ key: "north-raft", title: "North raft" }];
  return { observables, measurands, facilities } as unknown as TableContext["document"];
}

/** An invented campaign with one quantity. */
export const oneQuantity = contextOf(
  [observable("flux", "Jy", "linear", [depth])],
  [measurand("flux-may", "flux")],
);

/** An invented campaign with a quantity of each kind, two of them in windows. */
export const manyQuantities = contextOf(
  [
    observable("flux", "Jy", "linear", [depth]),
    observable("glow", "mag", "magnitude"),
    observable("level", "m", "log10"),
    observable("tremors", "1", "count"),
    observable("plume", null, "event"),
  ],
  [
    measurand("flux-may", "flux", inMay),
    measurand("flux-june", "flux", inJune),
    measurand("glow-may", "glow", inMay),
    measurand("level-now", "level"),
    measurand("tremors-may", "tremors", inMay),
    measurand("plume-may", "plume", inMay),
  ],
);

export type ReadDrafts = Drafts & { matches: ColumnMatch[] };

/** A text through the three steps: read, match, drafts. */
export function readDrafts(
  text: string,
  {
    document = oneQuantity,
    defaults = {},
    choices = {},
  }: Partial<TableContext> & { choices?: Partial<TableChoices> } = {},
): ReadDrafts {
  const table = readText("table", text);
  const context = { document, defaults };
  const matches = matchColumns(table, context, choices);
  return { matches, ...draftsOf(table, matches, context, choices) };
}
