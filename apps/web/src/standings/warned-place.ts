import type { CampaignDocument } from "@weighhouse/campaign/document";

/** What a warning's JSON Pointer into the campaign document is about, and the page that shows it. */
export function warnedPlace(
  at: string,
  document: CampaignDocument,
): { title: string; path: string } | null {
  const [, list, index] = /^\/(measurands|hypotheses|measurements)\/(\d+)/.exec(at) ?? [];
  const place = Number(index);
  if (list === "measurands") return quantity(document, document.measurands[place]?.key);
  if (list === "measurements") return quantity(document, document.measurements[place]?.measurand);
  const hypothesis = list === "hypotheses" ? document.hypotheses[place] : undefined;
  return hypothesis
    ? { title: hypothesis.title ?? hypothesis.key, path: `hypotheses/${hypothesis.key}` }
    : null;
}

function quantity(document: CampaignDocument, key: string | undefined) {
  const measurand = document.measurands.find((each) => each.key === key);
  return measurand
    ? { title: measurand.title ?? measurand.key, path: `quantities/${measurand.key}` }
    : null;
}
