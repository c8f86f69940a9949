import { afterAll, beforeAll, expect, it } from "vitest";
import { readCampaign } from "./read-campaign";
import { rememberMatch } from "./remember-match";
import { tableRows } from "./table-rows";
import { openLagoon } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let lagoon: Lagoon;
beforeAll(async () => {
  house = await openTestDesk();
  lagoon = await openLagoon(house);
}, 60_000);
afterAll(() => house.close());

const read = async (text: string, facility: string | null) => {
  const { document } = await readCampaign(house.desk, null, { key: lagoon.key });
  const bytes = new TextEncoder().encode(text);
  const defaults = { facility, measurand: document.measurands[0]!.key };
  const rows = await tableRows(house.desk, lagoon.key, { name: "night.csv", bytes, defaults });
  return rows(document);
};

it("a table's columns are read as they are remembered for its facility", async () => {
  const { document } = await readCampaign(house.desk, null, { key: lagoon.key });
  const facility = document.facilities[0]!.key;
  const columns = [
    { name: "A", unit: null },
    { name: "B", unit: null },
  ];
  const choices = { columns: { A: "value", B: "sd" } };
  await rememberMatch(house.desk, lagoon.member, { key: lagoon.key, facility, columns, choices });
  const known = await read("A,B\n41,2\n", facility);
  expect(known.rows[0]?.draft).toMatchObject({ value: 41, sd: 2, facility });
  expect((await read("A,B\n41,2\n", null)).problems).toMatchObject([
    { found: "no column that holds a result" },
  ]);
});

it("rows that are drafts already have no columns to remember", async () => {
  const { rows } = await read('{"value":41,"sd":2}\n{"value":42,"sd":2}\n', null);
  expect(rows.map(({ draft }) => draft?.["value"])).toEqual([41, 42]);
});
