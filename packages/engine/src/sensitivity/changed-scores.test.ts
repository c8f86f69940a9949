import { readCampaign } from "@weighhouse/campaign/read";
import { everyForm } from "@weighhouse/campaign/testing/every-form";
import { expect, test } from "vitest";
import { standingsFrom } from "../testing/documents";
import { expectSame } from "../testing/same-numbers";
import { changedScores } from "./changed-scores";
import { changesOf, without } from "./changes";
import { withReferences } from "./widths";

const forms = ["events", "correlated", "derivedValues", "polynomialCurves", "levelCurves"] as const;

test.each(forms)("what is taken over is what the changed campaign of %s scores", (name) => {
  const read = readCampaign(everyForm()[name]);
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  const document = read.value;
  const scoreOf = changedScores(document);
  const documents = [
    ...changesOf(document, standingsFrom(document)).map((change) => change.document),
    ...document.measurements.slice(0, 4).map(({ id }) => without(document, (one) => one.id === id)),
    withReferences(document, 0.6),
  ];
  for (const changed of documents) {
    const { hypotheses } = standingsFrom(changed);
    const whole = hypotheses.map(({ key, rank, log10BayesFactor, posterior, chiSquare }) => ({
      key,
      rank,
      log10BayesFactor,
      posterior,
      chiSquare,
    }));
    expectSame(scoreOf(changed), whole);
  }
  expect(documents.length).toBeGreaterThan(6);
});
