import type { Standings } from "@weighhouse/campaign/standings";
import { describe, expect, it } from "vitest";
import { compareJson } from "./differences";
import { statedErrors } from "./differences-within";

const standings = (error: number) =>
  ({
    hypotheses: [
      {
        key: "a",
        lnEvidence: -10,
        lnEvidenceError: error,
        log10BayesFactor: 0,
        posterior: 0.7,
        parameters: [{ key: "q", mean: 3, sd: 0.5, quantiles: [2, 3, 4] }],
      },
      {
        key: "b",
        lnEvidence: -11,
        lnEvidenceError: 0,
        log10BayesFactor: -0.43,
        posterior: 0.3,
        parameters: [],
      },
    ],
    pairs: [{ a: "a", b: "b", log10BayesFactor: 0.43, commonGround: { log10BayesFactor: 0.4 } }],
  }) as unknown as Standings;

const compare = (found: Standings, computed: Standings) =>
  compareJson(found, computed, { tolerance: 1e-9, within: statedErrors(computed) }).differences;

// oxlint-disable-next-line typescript/no-explicit-any -- tests reach anywhere into a document.
function changed(change: (standings: any) => unknown): string[] {
  const found = standings(0.1);
  change(found);
  return compare(found, standings(0.1));
}

describe("an evidence that was integrated may differ within five of its standard errors", () => {
  // 5 sqrt(2) 0.1 = 0.707 in ln Z, 0.307 in log10 B.
  // oxlint-disable-next-line typescript/no-explicit-any -- as above
  it.each<[string, (it: any) => unknown, boolean]>([
    ["its ln Z by 0.7", (it) => (it.hypotheses[0].lnEvidence -= 0.7), true],
    ["its ln Z by 0.8", (it) => (it.hypotheses[0].lnEvidence -= 0.8), false],
    ["a closed form beside it by 1e-6", (it) => (it.hypotheses[1].lnEvidence -= 1e-6), false],
    ["log10 B against it by 0.3", (it) => (it.hypotheses[1].log10BayesFactor += 0.3), true],
    ["log10 B against it by 0.4", (it) => (it.hypotheses[1].log10BayesFactor += 0.4), false],
    ["its pair by 0.3", (it) => (it.pairs[0].log10BayesFactor += 0.3), true],
    ["a parameter's mean by 0.5", (it) => (it.hypotheses[0].parameters[0].mean += 0.5), true],
    ["a parameter's mean by 1", (it) => (it.hypotheses[0].parameters[0].mean += 1), false],
    [
      "the error that it states, made ten times larger",
      (it) => (it.hypotheses[0].lnEvidenceError = 1),
      false,
    ],
    ["a word", (it) => (it.hypotheses[0].key = "c"), false],
  ])("%s", (_, change, allowed) => {
    expect(changed(change)).toHaveLength(allowed ? 0 : 1);
  });

  it("and nothing more where all are closed forms", () => {
    const found = standings(0);
    (found.hypotheses[0] as { lnEvidence: number }).lnEvidence -= 1e-6;
    expect(compare(found, standings(0))).toHaveLength(1);
  });
});
