import { readCampaign } from "@weighhouse/campaign/read";
import { everyForm, type FormName } from "@weighhouse/campaign/testing/every-form";
import { standingsSchema } from "@weighhouse/campaign/standings";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { describe, expect, test } from "vitest";
import { evidencesOf } from "./evidences";
import { scoreCampaign } from "./score";
import { addMeasurements, createState, restoreState, serialiseState, standingsOf } from "./state";

const forms = everyForm();
// Each scored in closed form or in one dimension: several times over in little time.
const quick = [
  "events",
  "asymmetric",
  "sharedErrors",
  "correlated",
  "derivedValues",
  "polynomialCurves",
  "smoothCurves",
  "levelCurves",
  "tolerances",
  "tablesAndEnsembles",
  "course",
] as const satisfies readonly FormName[];

function read(document: unknown): CampaignDocument {
  const one = readCampaign(document);
  if (!one.ok) throw new Error(JSON.stringify(one.problems));
  return one.value;
}

function stateOf(document: CampaignDocument) {
  const state = createState(document);
  if (!state.ok) throw new Error(JSON.stringify(state.problems));
  return state.value;
}

describe.each(quick)("a campaign of %s", (name) => {
  const document = read(forms[name]);
  const whole = standingsOf(stateOf(document));

  test("has standings that the schema finds right, every hypothesis with an evidence", () => {
    expect(standingsSchema.parse(whole)).toEqual(whole);
    for (const { lnEvidence } of whole.hypotheses) expect(lnEvidence).not.toBeNull();
  });

  test("is scored from a state that was written and read as from the one that was", () => {
    const state = stateOf(document);
    const restored = restoreState(serialiseState(state));
    expect(restored).not.toBeNull();
    expect(serialiseState(restored!)).toBe(serialiseState(state));
    expect(standingsOf(restored!)).toEqual(whole);
  });

  test("is scored alike when its measurements come one by one", () => {
    let state = stateOf({ ...document, measurements: [] });
    for (const measurement of document.measurements) {
      const added = addMeasurements(state, [measurement]);
      if (!added.ok) throw new Error(JSON.stringify(added.problems));
      state = added.value;
    }
    expect(standingsOf(state)).toEqual(whole);
  });

  test("says over time what its standings say", () => {
    for (const { hypothesis, lnEvidence } of evidencesOf(stateOf(document))) {
      const standing = whole.hypotheses.find(({ key }) => key === hypothesis);
      const expected = standing === undefined ? whole.noModel.lnEvidence : standing.lnEvidence;
      expect(lnEvidence).toBe(expected);
    }
  });

  test("doesn't hang on the order of its measurements", () => {
    const turned = scoreCampaign({ ...document, measurements: document.measurements.toReversed() });
    if (!turned.ok) throw new Error(JSON.stringify(turned.problems));
    turned.value.hypotheses.forEach(({ key, lnEvidence, chiSquare }) => {
      const there = whole.hypotheses.find((one) => one.key === key)!;
      expect(lnEvidence).toBeCloseTo(there.lnEvidence!, 8);
      if (there.chiSquare === null) expect(chiSquare).toBeNull();
      else expect(chiSquare).toBeCloseTo(there.chiSquare, 7);
    });
  });
});
