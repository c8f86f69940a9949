import type { TableContext } from "@weighhouse/tables/table-match";
import { expect, test } from "vitest";
import { noChoices } from "./choices";
import { OpenTable, type Judged } from "./open-table";
import type { TableSettings } from "./protocol";

// An invented campaign: why a bridge hums.
const document = {
  observables: [{ key: "hum", title: "Pitch", unit: "Hz", scale: "linear", conditions: [] }],
  measurands: [
    {
      key: "march",
      title: "Hum in March",
      observable: "hum",
      window: { from: "2024-03-01T00:00:00Z", to: "2024-04-01T00:00:00Z" },
      where: {},
      closed: null,
    },
  ],
} as unknown as TableContext["document"];

const settings: TableSettings = {
  choices: noChoices,
  remembered: [],
  defaults: { measurand: null, facility: null, batch: null, status: "final" },
};

const text = `observedAt,hum [Hz],e_hum,station
2024-03-02T10:00:00Z,110,1,pier
2024-03-03T10:00:00Z,111,-1,pier
2024-03-04T10:00:00Z,112,1,pier
`;

const open = (content: string) =>
  new OpenTable("night.csv", new TextEncoder().encode(content), document);

const judged = (fate: Judged["fate"], more: Partial<Judged> = {}): Judged => ({
  fate,
  id: null,
  measurand: "march",
  problems: [],
  conflict: null,
  notes: [],
  ...more,
});

test("a table says its columns with their first cells, and how each is read", () => {
  const table = open(text);
  expect(table.opened).toMatchObject({ format: "csv", rows: 3, problems: [] });
  expect(table.opened.columns[1]).toMatchObject({
    name: "hum",
    unit: "Hz",
    samples: ["110", "111", "112"],
  });
  const { matches, counts } = table.match(settings);
  expect(matches.map(({ field }) => field)).toEqual(["observedAt", "value", "sd", "facility"]);
  expect(counts).toEqual({ new: 0, alreadyThere: 0, conflict: 0, refused: 1, unseen: 2 });
});

test("a row that doesn't read is refused with its line and column, and is not sent", () => {
  const table = open(text);
  table.match(settings);
  expect(table.sendable(false)).toEqual([0, 2]);
  const [refused] = table.shown("refused", 0, 10);
  expect(refused).toMatchObject({ line: 3, fate: "refused", problems: [{ column: "e_hum" }] });
});

test("rows that the campaign refused are left out only where that is asked for", () => {
  const table = open(text);
  table.match(settings);
  table.judge(0, judged("new"));
  table.judge(2, judged("refused", { problems: [{ column: "id", found: "x", allowed: "y" }] }));
  expect(table.sendable(false)).toEqual([0, 2]);
  expect(table.sendable(true)).toEqual([0]);
  expect(table.counts()).toMatchObject({ new: 1, refused: 2, unseen: 0 });
});

test("faults are gone through in the list's order, and from its start again", () => {
  const table = open(text);
  table.match(settings);
  table.judge(2, judged("conflict"));
  expect(table.nextFault("all", -1)).toBe(1);
  expect(table.nextFault("all", 1)).toBe(2);
  expect(table.nextFault("all", 2)).toBe(1);
  expect(table.nextFault("conflict", -1)).toBe(0);
  expect(table.nextFault("new", -1)).toBeNull();
});

test("what is remembered of the rows' one facility is used, and says so; what is chosen goes before it", () => {
  const odd = text.replace("hum [Hz],e_hum", "peak,scatter");
  const choices = { ...noChoices, columns: { peak: "value", scatter: "sd" } };
  const remembered = [
    { facility: "tower", choices: { ...noChoices, columns: { peak: "ignore" } } },
    { facility: "pier", choices },
  ];
  const table = open(odd);
  const matched = table.match({ ...settings, remembered });
  expect(matched).toMatchObject({ facility: "pier", rememberedFor: "pier", choices });
  expect(matched.matches.map(({ field, why }) => [field, why]).slice(1, 3)).toEqual([
    ["value", "remembered"],
    ["sd", "remembered"],
  ]);
  const corrected = table.match({
    ...settings,
    remembered,
    choices: { ...noChoices, columns: { scatter: "extra" } },
  });
  expect(corrected.matches[2]).toMatchObject({ field: "extra", why: "chosen" });
  expect(corrected.choices.columns).toEqual({ peak: "value", scatter: "extra" });
});

test("a table of several facilities is nobody's alone: nothing remembered is used", () => {
  const table = open(text.replace("112,1,pier", "112,1,tower"));
  const remembered = [{ facility: "pier", choices: { ...noChoices, columns: { hum: "ignore" } } }];
  expect(table.match({ ...settings, remembered })).toMatchObject({
    facility: null,
    rememberedFor: null,
  });
});

test("the status for all rows is that of rows that give none", () => {
  const table = open(
    text.replace("station", "status").replaceAll("pier", "").replace("110,1,", "110,1,final"),
  );
  table.match({ ...settings, defaults: { ...settings.defaults, status: "provisional" } });
  expect(table.draft(0)["status"]).toBe("final");
  expect(table.draft(2)["status"]).toBe("provisional");
});

test("drafts by the line (NDJSON) have no columns to match", () => {
  const draft = { observable: "hum", observedAt: "2024-03-02T10:00:00Z", value: 110, sd: 1 };
  const table = new OpenTable(
    "night.ndjson",
    new TextEncoder().encode(`${JSON.stringify(draft)}\n{"value":1,"wrong":2}\n`),
    document,
  );
  const { matches, counts } = table.match(settings);
  expect(matches).toEqual([]);
  expect(counts).toMatchObject({ refused: 1, unseen: 1 });
});
