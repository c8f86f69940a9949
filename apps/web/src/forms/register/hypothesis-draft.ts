import type { CampaignDocument, Hypothesis } from "@weighhouse/campaign/document";
import { numberFromText, numberToText, textOrNull } from "../entered-text";

/** What the form holds of one prediction: text as typed, one draft per quantity of the campaign. */
export interface PredictionDraft {
  measurand: string;
  says: "silent" | "number";
  expected: string;
  tolerance: "exact" | "normal";
  sd: string;
  sharing: "common" | "each";
  decisive: boolean;
  /** For the preview only: the uncertainty that a measurement is supposed to have. */
  supposedSd: string;
}

export interface HypothesisDraft {
  title: string;
  key: string;
  statement: string;
  team: string;
  group: string;
  weight: string;
  predictions: PredictionDraft[];
}

function silentOn(measurand: string): PredictionDraft {
  return {
    measurand,
    says: "silent",
    expected: "",
    tolerance: "normal",
    sd: "",
    sharing: "common",
    decisive: false,
    supposedSd: "",
  };
}

export function emptyHypothesisDraft(
  document: CampaignDocument,
  team: string | null,
): HypothesisDraft {
  return {
    title: "",
    key: "",
    statement: "",
    team: team ?? "",
    group: "",
    weight: "1",
    predictions: openMeasurands(document).map((measurand) => silentOn(measurand.key)),
  };
}

/** Predictions for exactly the quantities that there are now; the same list where nothing changed. */
export function alignedPredictions(
  document: CampaignDocument,
  predictions: PredictionDraft[],
): PredictionDraft[] {
  const keys = openMeasurands(document).map(({ key }) => key);
  const there = predictions.map(({ measurand }) => measurand);
  if (keys.length === there.length && keys.every((key, index) => key === there[index]))
    return predictions;
  const drafts = new Map(predictions.map((draft) => [draft.measurand, draft]));
  return keys.map((key) => drafts.get(key) ?? silentOn(key));
}

/** Measurands that still take predictions, by the start of their window; undated ones last. */
export function openMeasurands(document: CampaignDocument): CampaignDocument["measurands"] {
  const opens = (measurand: CampaignDocument["measurands"][number]) =>
    measurand.window.from ?? "9999";
  return document.measurands
    .filter((measurand) => measurand.closed === null)
    .toSorted((a, b) => opens(a).localeCompare(opens(b)));
}

/** The hypothesis that the form's text stands for, as the schemas read it. */
export function hypothesisContent(draft: HypothesisDraft): Record<string, unknown> {
  return {
    key: draft.key.trim(),
    title: draft.title.trim(),
    statement: textOrNull(draft.statement),
    team: textOrNull(draft.team),
    group: textOrNull(draft.group),
    weight: numberFromText(draft.weight) ?? 1,
    predictions: spoken(draft).map(predictionContent),
  };
}

function predictionContent(draft: PredictionDraft): Record<string, unknown> {
  return {
    measurand: draft.measurand,
    expected: numberFromText(draft.expected),
    tolerance:
      draft.tolerance === "exact"
        ? null
        : { family: "normal", sd: numberFromText(draft.sd), sharing: draft.sharing },
    decisive: draft.decisive,
  };
}

/** Where a place in the content stands in the form: silent quantities are drafts, not predictions. */
export function hypothesisField(
  draft: HypothesisDraft,
  path: readonly (string | number)[],
): string {
  const [part, index, ...rest] = path;
  if (part !== "predictions" || index === undefined) return path.join(".");
  const row = spoken(draft)[Number(index)];
  if (row === undefined) return "predictions";
  const at = draft.predictions.indexOf(row);
  const [field, inner] = rest;
  if (field === "tolerance") return `predictions.${at}.${inner === "sharing" ? "sharing" : "sd"}`;
  return `predictions.${at}.${field === "decisive" ? "decisive" : "expected"}`;
}

type Shown = Pick<Hypothesis, "title" | "key" | "statement" | "team" | "group" | "weight"> & {
  predictions: Pick<
    Hypothesis["predictions"][number],
    "measurand" | "expected" | "tolerance" | "decisive"
  >[];
};

/** A registered hypothesis back in the form, to be amended. */
export function draftOfHypothesis(document: CampaignDocument, hypothesis: Shown): HypothesisDraft {
  const said = new Map(hypothesis.predictions.map((each) => [each.measurand, each]));
  return {
    title: hypothesis.title,
    key: hypothesis.key,
    statement: hypothesis.statement ?? "",
    team: hypothesis.team ?? "",
    group: hypothesis.group ?? "",
    weight: numberToText(hypothesis.weight),
    predictions: openMeasurands(document).map(({ key }) => {
      const prediction = said.get(key);
      return prediction === undefined ? silentOn(key) : draftOfPrediction(prediction);
    }),
  };
}

function draftOfPrediction(prediction: Shown["predictions"][number]): PredictionDraft {
  const { tolerance } = prediction;
  return {
    ...silentOn(prediction.measurand),
    says: "number",
    expected: numberToText(prediction.expected),
    tolerance: tolerance?.family === "normal" ? "normal" : "exact",
    sd: tolerance?.family === "normal" ? numberToText(tolerance.sd) : "",
    sharing: tolerance?.family === "normal" && tolerance.sharing === "each" ? "each" : "common",
    decisive: prediction.decisive ?? false,
  };
}

function spoken(draft: HypothesisDraft): PredictionDraft[] {
  return draft.predictions.filter((prediction) => prediction.says === "number");
}
