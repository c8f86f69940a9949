import type { CampaignDocument } from "@weighhouse/campaign/document";

/** A part of the campaign and, from the campaign's own, the path of the page that shows it. */
export type Place = { key: string; title: string; path: string };

/**
 * What a warning's JSON Pointer into the campaign document is about: one quantity, or a hypothesis
 * and, where it points at a prediction, its quantity.
 */
export function warnedPlaces(at: string, document: CampaignDocument): Place[] {
  const [, list, index, prediction] =
    /^\/(measurands|hypotheses|measurements)\/(\d+)(?:\/predictions\/(\d+))?/.exec(at) ?? [];
  const place = Number(index);
  const hypothesis = list === "hypotheses" ? document.hypotheses[place] : undefined;
  const places = {
    measurands: [measurandPlace(document, document.measurands[place]?.key)],
    measurements: [measurandPlace(document, document.measurements[place]?.measurand)],
    hypotheses: [
      hypothesisPlace(document, hypothesis?.key),
      measurandPlace(document, hypothesis?.predictions[Number(prediction)]?.measurand),
    ],
  };
  return (places[list as keyof typeof places] ?? []).filter((each) => each !== null);
}

export function hypothesisPlace(document: CampaignDocument, key: string | undefined): Place | null {
  const hypothesis = document.hypotheses.find((each) => each.key === key);
  return hypothesis ? { ...named(hypothesis), path: `hypotheses/${hypothesis.key}` } : null;
}

function measurandPlace(document: CampaignDocument, key: string | undefined): Place | null {
  const measurand = document.measurands.find((each) => each.key === key);
  return measurand ? { ...named(measurand), path: `quantities/${measurand.key}` } : null;
}

function named({ key, title }: { key: string; title: string | null }) {
  return { key, title: title ?? key };
}
