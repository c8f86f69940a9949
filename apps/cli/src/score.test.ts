import { readFileSync } from "node:fs";
import { standingsSchema, type Standings } from "@weighhouse/campaign/standings";
import { describe, expect, test } from "vitest";
import published from "../../../test/reference/campaigns/eclipse-1919.expected.json";
import { eclipse, weighhouse } from "./testing/command";

const document = JSON.parse(readFileSync(eclipse, "utf8"));
const changed = (change: (copy: typeof document) => void) => {
  const copy = structuredClone(document);
  change(copy);
  return JSON.stringify(copy);
};

/** Of numbers that may be tiny; 0 for two zeros. */
function relative(found: number, wanted: number): number {
  return found === wanted ? 0 : Math.abs(found - wanted) / Math.abs(wanted);
}

describe("weighhouse score --json", () => {
  // Published results of Dyson, Eddington & Davidson (1920), recomputed with scipy: test/reference/README.md.
  test("agrees with the expected standings of the 1919 eclipse to 1e-9", async () => {
    const { code, out, err } = await weighhouse(["score", eclipse, "--json"]);
    expect([code, err]).toEqual([0, ""]);
    const standings = JSON.parse(out) as Standings;
    for (const [key, wanted] of Object.entries(published.hypotheses)) {
      const found = standings.hypotheses.find((standing) => standing.key === key);
      for (const field of [
        "chiSquare",
        "pValue",
        "lnEvidence",
        "log10BayesFactor",
        "posterior",
      ] as const) {
        expect(relative(found?.[field] ?? NaN, wanted[field]), `${key} ${field}`).toBeLessThan(
          1e-9,
        );
      }
      expect(found?.degreesOfFreedom).toBe(wanted.degreesOfFreedom);
    }
    const combined = standings.measurands[0]?.combined;
    expect(relative(combined?.value ?? NaN, published.combined.value)).toBeLessThan(1e-9);
    expect(relative(combined?.sd ?? NaN, published.combined.sd)).toBeLessThan(1e-9);
    const verdicts = standings.verdicts.map(({ hypothesis, verdict }) => [hypothesis, verdict]);
    expect(Object.fromEntries(verdicts)).toEqual(published.verdicts);
  });

  test("is a standings document, its keys in the schema's order, the same bytes each time", async () => {
    const [first, second] = await Promise.all([
      weighhouse(["score", eclipse, "--json"]),
      weighhouse(["score", "-", "--json"], { input: JSON.stringify(document) }),
    ]);
    expect(first.out).toBe(second.out);
    // Zod writes an object's keys in its schema's order.
    const inOrder = standingsSchema.parse(JSON.parse(first.out));
    expect(first.out).toBe(`${JSON.stringify(inOrder, null, 2)}\n`);
  });

  test("counts predictions filed after data only with --include-after", async () => {
    const input = changed((copy) => {
      copy.measurements[0].postedAt = "1919-11-06T12:00:00Z";
      copy.hypotheses[1].registeredAt = "1920-01-01T00:00:00Z";
    });
    const compared = async (...flags: string[]) => {
      const { out } = await weighhouse(["score", "-", "--json", ...flags], { input });
      const standings = JSON.parse(out) as Standings;
      return standings.hypotheses.find(({ key }) => key === "half")?.compared;
    };
    expect(await compared()).toBe(0);
    expect(await compared("--include-after")).toBe(2);
  });
});

describe("weighhouse score", () => {
  test("sets the standings, the verdicts and the combined value for people", async () => {
    const { code, out } = await weighhouse(["score", eclipse], { env: { COLUMNS: "160" } });
    expect(code).toBe(0);
    expect(out).toMatch(
      /^1 {2}full +General relativity +1\.77 \/ 2 +0\.41 +−0\.19 +0 +leads +1 − 2\.1 × 10⁻⁹ +1\/0\/0 +2\/0$/m,
    );
    expect(out).toMatch(
      /^2 {2}half .* 41\.69 \/ 2 +8\.8 × 10⁻¹⁰ +−20\.15 +−8\.67 +decisive +2\.1 × 10⁻⁹ +0\/1\/0 +2\/0$/m,
    );
    expect(out).toMatch(/^ +no model +−\d/m);
    expect(out).toMatch(
      /^Deflection at the limb, May 1919 {2}\+1\.1 pass {2}\+6\.4 fail {2}\+11\.7 fail$/m,
    );
    expect(out).toMatch(
      /^Deflection at the limb, May 1919 {2}1\.93 ± 0\.17 arcsec {2}0\.60 \/ 1 .* 2$/m,
    );
  });

  test.each([160, 120, 100, 80, 60, 40])("fits a terminal of %i columns", async (columns) => {
    const { out } = await weighhouse(["score", eclipse], { env: { COLUMNS: String(columns) } });
    const longest = Math.max(...out.split("\n").map((line) => [...line].length));
    expect(longest).toBeLessThanOrEqual(columns);
    expect(out).toContain("−8.67");
  });

  test("writes no escape codes into a pipe, and none from the document", async () => {
    const input = changed((copy) => {
      copy.campaign.title = "\u001b[31mred\u001b[0m\u0007 title";
    });
    const { out } = await weighhouse(["score", "-"], { input });
    expect([...out].filter((character) => character < " " && character !== "\n")).toEqual([]);
    expect(out).toContain("title");
  });
});

describe("a document that is not valid", () => {
  const sdOf = (copy: typeof document) => copy.measurements[1];

  test("is refused with exit 1 and each error on a line: pointer, what, allowed", async () => {
    const input = changed((copy) => {
      sdOf(copy).sd = -1;
      copy.hypotheses[0].predictions[0].measurand = "nowhere";
    });
    const { code, out, err } = await weighhouse(["score", "-"], { input });
    expect([code, out]).toEqual([1, ""]);
    const lines = err.trimEnd().split("\n");
    expect(lines).toHaveLength(2);
    expect(lines).toContainEqual("/measurements/1/sd: found -1; allowed a number above 0");
    expect(lines).toContainEqual(
      "/hypotheses/0/predictions/0/measurand: found the unknown measurand nowhere; allowed limb",
    );
  });

  test("so is one that is no JSON, no UTF-8, or of another format", async () => {
    const noJson = await weighhouse(["score", "-"], { input: "{" });
    expect(noJson.code).toBe(1);
    expect(noJson.err).toMatch(/^\(document\): found .*; allowed .*\n$/);
    const other = await weighhouse(["score", "-"], {
      input: changed((copy) => (copy.format = "weighhouse-campaign/9")),
    });
    expect(other.code).toBe(1);
    expect(other.err).toBe(
      '/format: found "weighhouse-campaign/9"; allowed "weighhouse-campaign/1"\n',
    );
  });

  test("what the engine can't score is refused by name and place", async () => {
    const input = changed((copy) => {
      copy.hypotheses[0].predictions[0] = {
        measurand: "limb",
        expected: 1,
        tolerance: { family: "normal", sd: 1e200 },
      };
    });
    for (const command of ["score", "check"]) {
      const { code, out, err } = await weighhouse([command, "-"], { input });
      expect([code, out]).toEqual([1, ""]);
      expect(err).toMatch(
        /^\/hypotheses\/0\/predictions\/0\/tolerance\/sd: found 1e\+200; allowed .+\n$/,
      );
    }
  });

  test("check lists the same errors", async () => {
    const input = changed((copy) => (sdOf(copy).sd = 0));
    const { code, out, err } = await weighhouse(["check", "-"], { input });
    expect([code, out]).toEqual([1, ""]);
    expect(err).toBe("/measurements/1/sd: found 0; allowed a number above 0\n");
  });
});

describe("weighhouse check", () => {
  test("says what a valid document holds", async () => {
    const { code, out, err } = await weighhouse(["check", eclipse]);
    expect([code, err]).toEqual([0, ""]);
    expect(out).toBe("Valid: 3 hypotheses, 1 measurand, 2 measurements, 0 warnings\n");
  });

  test("lists warnings with their places, and stays at exit 0", async () => {
    const input = changed((copy) => {
      copy.measurements[0].sameData = "plate-7";
      copy.measurements[1].sameData = "plate-7";
    });
    const { code, out } = await weighhouse(["check", "-"], { input });
    expect(code).toBe(0);
    expect(out).toContain("1 warning\n");
    expect(out).toMatch(/^same-data-twice: .*\(\/measurements\/\d\)$/m);
  });
});
