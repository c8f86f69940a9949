import { describe, expect, test } from "vitest";
import { readCampaign } from "@weighhouse/campaign/read";
import { createState, standingsOf } from "./state";
import fixture from "./fixtures/hard-cases.json";
import { scoreSilence } from "./hypothesis-scores";
import { createWorkspace } from "./create-workspace";

interface HardCase {
  name: string;
  document: unknown;
  noModel: string;
  hypotheses: Record<string, { lnEvidence: string; chiSquare: string }>;
}

/** Dense matrices at 60 digits and quadrature over the shared errors: see the fixture's source. */
describe("campaigns that are hard in double precision agree with mpmath", () => {
  test.each(fixture.cases as unknown as HardCase[])("$name", (hard) => {
    const read = readCampaign(hard.document);
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    const state = createState(read.value);
    if (!state.ok) throw new Error(JSON.stringify(state.problems));
    const { noModel, hypotheses } = standingsOf(state.value);
    const near = (found: number, text: string, allowed = 1e-9) => {
      const expected = Number(text);
      const size = allowed * Math.max(1, Math.abs(expected));
      expect(Math.abs(found - expected), `${found} for ${text}`).toBeLessThan(size);
    };
    // On the lattice within three of its stated errors; every other way to 1e-9.
    const { lnEvidenceError } = scoreSilence(createWorkspace(state.value.frame, state.value.sums));
    near(noModel.lnEvidence!, hard.noModel, Math.max(1e-9, 3 * lnEvidenceError));
    expect(lnEvidenceError).toBeLessThan(1e-3);
    for (const [key, expected] of Object.entries(hard.hypotheses)) {
      const found = hypotheses.find((one) => one.key === key)!;
      near(found.lnEvidence!, expected.lnEvidence);
      near(found.chiSquare!, expected.chiSquare);
      expect(found.lnEvidenceError).toBe(0);
    }
  });
});
