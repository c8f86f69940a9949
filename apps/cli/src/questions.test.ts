import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { planSchema } from "@weighhouse/campaign/plan";
import { sensitivitySchema } from "@weighhouse/campaign/sensitivity";
import { simulationSchema } from "@weighhouse/campaign/simulation";
import { afterAll, describe, expect, test } from "vitest";
import { eclipse, weighhouse } from "./testing/command";

const folder = mkdtempSync(join(tmpdir(), "weighhouse-questions-"));
afterAll(() => rmSync(folder, { recursive: true }));

function candidatesFile(name: string, candidates: object[]): string {
  const path = join(folder, name);
  writeFileSync(path, JSON.stringify({ format: "weighhouse-candidates/1", candidates }));
  return path;
}

const plates = candidatesFile("plates.json", [
  { key: "long", measurand: "limb", sd: 0.1, cost: 2 },
  { key: "short", measurand: "limb", sd: 0.3, cost: 1 },
]);

const wide = { env: { COLUMNS: "160" } };

describe("weighhouse sensitivity", () => {
  test("writes the sensitivity document, or says first what would change the leader", async () => {
    const { code, out } = await weighhouse(["sensitivity", eclipse, "--json"]);
    expect(code).toBe(0);
    const found = sensitivitySchema.parse(JSON.parse(out));
    expect(found.leader).toBe("full");
    const report = await weighhouse(["sensitivity", eclipse], wide);
    expect(report.out.split("\n")[0]).toBe(found.finding);
    expect(report.out).toMatch(/^without the facility sobral +full +0 +−0\.58 +−2\.82$/m);
  });
});

describe("weighhouse plan", () => {
  test("writes the plan document, highest gain per cost first", async () => {
    const { code, out } = await weighhouse(["plan", eclipse, "--candidates", plates, "--json"]);
    expect(code).toBe(0);
    const { candidates, sets } = planSchema.parse(JSON.parse(out));
    expect(candidates.map(({ key }) => key)).toEqual(["long", "short"]);
    expect(sets.map((set) => set.candidates)).toEqual([["long", "short"]]);
  });

  test("sets candidates, predictives and sets for people", async () => {
    const { out } = await weighhouse(["plan", eclipse, "--candidates", plates], wide);
    expect(out).toMatch(/^long +6\.45 × 10⁻⁸ +3\.22 × 10⁻⁸ /m);
    expect(out).toMatch(/^long +1\.75 +0\.87 +0$/m);
    expect(out).toContain("per cost: long, short");
  });

  test("lists everything wrong with the candidates and ends with 1", async () => {
    const wrong = candidatesFile("wrong.json", [{ key: "a", measurand: "rim" }]);
    const { code, out, err } = await weighhouse(["plan", eclipse, "--candidates", wrong]);
    expect([code, out]).toEqual([1, ""]);
    expect(err).toBe(
      '/candidates/0/measurand: found "rim"; allowed a measurand of the campaign that isn\'t derived\n',
    );
  });
});

describe("weighhouse simulate", () => {
  const args = ["simulate", eclipse, "--candidates", plates];

  test("writes the simulation document, the same bytes each time", async () => {
    const [once, again] = await Promise.all([
      weighhouse([...args, "--runs", "20", "--json"]),
      weighhouse([...args, "--runs", "20", "--json"]),
    ]);
    expect(once.out).toBe(again.out);
    const { runs, truths } = simulationSchema.parse(JSON.parse(once.out));
    expect([runs, truths.length]).toEqual([20, 3]);
  });

  test("sets a row for each hypothesis, were it true", async () => {
    const { out } = await weighhouse([...args, "--runs", "20"], wide);
    expect(out).toContain("20 campaigns of 2 measurements drawn from each hypothesis");
    expect(out).toMatch(/^full +100 % +100 % +0 % /m);
  });

  test("refuses a number of runs that is none", async () => {
    const { code, err } = await weighhouse([...args, "--runs", "many"]);
    expect([code, err]).toEqual([
      2,
      "found --runs many; allowed a whole number from 1 to 100000\n",
    ]);
  });
});

describe("weighhouse chance", () => {
  test("corrects for the looks and bounds the Bayes factor", async () => {
    const { code, out } = await weighhouse(["chance", "0.01", "--looks", "10", "--json"]);
    expect(code).toBe(0);
    // 1 - 0.99^10, and 1 / (-e p ln p) at both.
    expect(JSON.parse(out)).toEqual({
      p: 0.01,
      looks: 10,
      sidak: expect.closeTo(0.0956179249911955, 15),
      bonferroni: 0.1,
      bayesFactorBound: expect.closeTo(-1 / (Math.E * 0.01 * Math.log(0.01)), 12),
      bayesFactorBoundAfterLooks: expect.closeTo(1.6393, 3),
    });
    const { out: report } = await weighhouse(["chance", "0.01", "--looks", "10"]);
    expect(report).toMatch(/^Bayes factor against chance +at most 7\.988$/m);
    expect(report).toContain("enter no standings");
  });

  test("refuses what is no probability", async () => {
    const { code, err } = await weighhouse(["chance", "1.5"]);
    expect([code, err]).toEqual([2, "found 1.5; allowed a probability above 0 and below 1\n"]);
  });
});
