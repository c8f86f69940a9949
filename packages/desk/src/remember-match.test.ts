import { afterAll, beforeAll, expect, it } from "vitest";
import { readMatch, readMatches } from "./read-match";
import { forgetMatch, rememberMatch } from "./remember-match";
import { openLagoon } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let lagoon: Lagoon;
let place: { key: string; facility: string; columns: { name: string; unit: string | null }[] };

beforeAll(async () => {
  house = await openTestDesk();
  lagoon = await openLagoon(house);
  const columns = [
    { name: "brightness", unit: "nW" },
    { name: "jd", unit: "d" },
  ];
  place = { key: lagoon.key, facility: "pier", columns };
}, 60_000);
afterAll(() => house.close());

const choices = {
  columns: { brightness: "value", jd: "observedAt" },
  units: { brightness: "nW" },
  times: { jd: { format: "jd" as const, scale: "tt" as const, offset: 2_400_000 } },
  decimal: "comma" as const,
  limits: { confidence: 0.95 },
};

it("a match is remembered for the facility and for tables with the same columns, in any order", async () => {
  await rememberMatch(house.desk, lagoon.member, { ...place, choices });
  const columns = place.columns.toReversed();
  expect(await readMatch(house.desk, { ...place, columns })).toEqual(choices);
  const all = await readMatches(house.desk, lagoon.rival, { key: place.key, columns });
  expect(all).toMatchObject([{ facility: "pier", choices }]);
  expect(await readMatch(house.desk, { ...place, facility: "west" })).toBeNull();
});

it("a column whose unit changed makes another table: nothing is remembered of it", async () => {
  await rememberMatch(house.desk, lagoon.member, { ...place, choices });
  const columns = place.columns.map(({ name }) => ({ name, unit: "uW" }));
  expect(await readMatch(house.desk, { ...place, columns })).toBeNull();
});

it("a later match takes the place of the one before; one without choices forgets it", async () => {
  await rememberMatch(house.desk, lagoon.member, { ...place, choices });
  const later = { columns: { brightness: "extra" } };
  await rememberMatch(house.desk, lagoon.rival, { ...place, choices: later });
  expect((await readMatch(house.desk, place))?.columns).toEqual(later.columns);
  const kept = await rememberMatch(house.desk, lagoon.rival, { ...place, choices: {} });
  expect(kept).toEqual({ remembered: false });
  expect(await readMatch(house.desk, place)).toBeNull();
});

it("what was remembered can be forgotten", async () => {
  await rememberMatch(house.desk, lagoon.member, { ...place, choices });
  expect(await forgetMatch(house.desk, lagoon.member, place)).toEqual({ forgotten: true });
  expect(await forgetMatch(house.desk, lagoon.member, place)).toEqual({ forgotten: false });
  expect(await readMatch(house.desk, place)).toBeNull();
});

it("who may not post remembers nothing, and reads nothing", async () => {
  const { reader, stranger } = lagoon;
  await expect(rememberMatch(house.desk, reader, { ...place, choices })).rejects.toMatchObject({
    code: "not-allowed",
  });
  const { key, columns } = place;
  await expect(readMatches(house.desk, stranger, { key, columns })).rejects.toMatchObject({
    code: "not-allowed",
  });
});

it("a facility that nobody declared and a column that isn't there are refused by their names", async () => {
  await expect(
    rememberMatch(house.desk, lagoon.member, { ...place, facility: "moon", choices }),
  ).rejects.toMatchObject({ problems: [{ pointer: "/facility", found: "moon" }] });
  await expect(
    rememberMatch(house.desk, lagoon.member, {
      ...place,
      choices: { columns: { depth: "extra" } },
    }),
  ).rejects.toMatchObject({ problems: [{ found: "the column depth" }] });
});
