import { afterAll, beforeAll, beforeEach, expect, it } from "vitest";
import { amendHypothesis } from "./amend-hypothesis";
import { closeRegistration } from "./close-registration";
import { postMeasurements } from "./post-measurements";
import { readCampaign } from "./read-campaign";
import { readStandings } from "./read-standings";
import { registerHypothesis } from "./register-hypothesis";
import { setAsideMeasurement } from "./set-aside-measurement";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let lagoon: Lagoon;
let number = 0;
beforeAll(async () => {
  house = await openTestDesk();
});
afterAll(() => house.close());
beforeEach(async () => {
  number += 1;
  lagoon = await openLagoon(house, { key: `lagoon-${number}` });
});

const register = (key: string, expected: number, who = lagoon.member) =>
  registerHypothesis(house.desk, who, { key: lagoon.key, hypothesis: hypothesis(key, expected) });
const postReadings = (...values: number[]) =>
  postMeasurements(house.desk, lagoon.member, {
    key: lagoon.key,
    source: { from: "drafts", drafts: values.map((value, i) => reading(`n${i}`, value)) },
  });
const newest = async () => {
  const { size, document } = await readCampaign(house.desk, null, { key: lagoon.key });
  const { standings } = await readStandings(house.desk, null, { key: lagoon.key, size });
  return { size, document, standings };
};

it("a hypothesis is its registrant's team's, at the ledger's time", async () => {
  const registered = await register("algae", 40);
  const { document } = await newest();
  expect(document.hypotheses[0]).toMatchObject({
    key: "algae",
    team: "algae",
    registeredAt: registered.registeredAt,
  });
  expect(registered.orders).toEqual([{ measurand: "new-moon", order: "before-observation" }]);
});

it("the coordinator, who is in no team, registers what no team stands behind", async () => {
  await register("nothing-glows", 0, lagoon.coordinator);
  expect((await newest()).document.hypotheses[0]).toMatchObject({ team: null });
});

it("a fault of the hypothesis points at its field in the input, all of them at once", async () => {
  const before = (await newest()).size;
  const bad = {
    ...hypothesis("algae", 40),
    predictions: [
      { measurand: "half-moon", expected: 3 },
      { measurand: "new-moon", expected: "2 +" },
    ],
  };
  const { key, member } = lagoon;
  await expect(
    registerHypothesis(house.desk, member, { key, hypothesis: bad }),
  ).rejects.toMatchObject({
    code: "invalid",
    problems: [
      { pointer: "/hypothesis/predictions/0/measurand", code: "unknown-key" },
      { pointer: "/hypothesis/predictions/1/expected", code: "bad-expression" },
    ],
  });
  expect((await newest()).size).toBe(before);
});

it("what the engine can't score is refused by name, never entered", async () => {
  const { key, member } = lagoon;
  const boundless = {
    ...hypothesis("algae", 40),
    predictions: [
      {
        measurand: "new-moon",
        expected: 40,
        tolerance: { family: "normal" as const, sd: 1e200 },
      },
    ],
  };
  await expect(
    registerHypothesis(house.desk, member, { key, hypothesis: boundless }),
  ).rejects.toMatchObject({
    problems: [
      {
        pointer: expect.stringMatching(/^\/hypothesis\/predictions\/0/),
        code: "out-of-range",
      },
    ],
  });
});

it("after registration's close it is taken, marked after data, and leaves the others alone", async () => {
  await register("algae", 40);
  await postReadings(41, 42);
  const before = (await newest()).standings;
  await closeRegistration(house.desk, lagoon.coordinator, { key: lagoon.key });
  const late = await register("minerals", 41.5, lagoon.rival);
  expect(late.orders).toEqual([{ measurand: "new-moon", order: "after" }]);
  const { standings } = await newest();
  const of = (from: typeof standings) => from.hypotheses.find(({ key }) => key === "algae");
  expect(of(standings)).toEqual({ ...of(before), posterior: of(standings)?.posterior });
  expect(standings.warnings.map(({ code }) => code)).toContain("filed-after-excluded");
});

it("an amendment dates what it changes anew, and leaves the rest as it was filed", async () => {
  const two = {
    ...hypothesis("algae", 40),
    predictions: [
      { measurand: "new-moon", expected: 40, tolerance: { family: "normal" as const, sd: 5 } },
      { measurand: "full-moon", expected: 20, tolerance: { family: "normal" as const, sd: 5 } },
    ],
  };
  const { key, member } = lagoon;
  const first = await registerHypothesis(house.desk, member, { key, hypothesis: two });
  await postReadings(52);
  const [kept, changed] = two.predictions as [(typeof two.predictions)[0], unknown];
  const hypothesisNow = { ...two, predictions: [{ ...kept, expected: 52 }, changed] };
  const amended = await amendHypothesis(house.desk, member, {
    key,
    hypothesis: hypothesisNow as typeof two,
  });
  expect(amended.orders).toEqual([
    { measurand: "new-moon", order: "after" },
    { measurand: "full-moon", order: "before-observation" },
  ]);
  const { document } = await newest();
  expect(document.hypotheses[0]?.predictions.map(({ registeredAt }) => registeredAt)).toEqual([
    amended.registeredAt,
    first.registeredAt,
  ]);
});

it("a key that is taken is refused, though another team comes with it", async () => {
  await register("algae", 40);
  await expect(register("algae", 70, lagoon.rival)).rejects.toMatchObject({
    problems: [{ pointer: "/hypothesis/key", code: "duplicate" }],
  });
});

it("a measurement set aside stays on record and leaves the standings as if it weren't there", async () => {
  await register("algae", 40);
  await postReadings(41);
  const before = (await newest()).standings;
  const source = { from: "drafts" as const, drafts: [reading("blurred", 90)] };
  await postMeasurements(house.desk, lagoon.member, { key: lagoon.key, source });
  await setAsideMeasurement(house.desk, lagoon.member, {
    key: lagoon.key,
    id: "blurred",
    reason: "out of focus",
  });
  const { document, standings } = await newest();
  expect(document.measurements.map(({ id, setAside }) => ({ id, setAside }))).toEqual([
    { id: "n0", setAside: null },
    { id: "blurred", setAside: { reason: "out of focus" } },
  ]);
  expect(standings.hypotheses).toEqual(before.hypotheses);
  expect(standings.measurements).toEqual({ counted: 1, setAside: 1 });
  const again = setAsideMeasurement(house.desk, lagoon.member, {
    key: lagoon.key,
    id: "blurred",
    reason: "again",
  });
  await expect(again).rejects.toMatchObject({ code: "conflict" });
});
