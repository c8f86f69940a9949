import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { formatCount } from "@weighhouse/figures/numbers";
import { MOST_MEASURAND_FIGURES } from "./figures";
import type { Manifest } from "./manifest";
import { inClosedForm } from "./closed-form";

/** Sensitivity scores the campaign some hundreds of times: up to here that takes seconds. */
const MOST_FOR_SENSITIVITY = 2000;

/** Why an archive is made without sensitivity.json; null where it holds it. */
export function sensitivityLeftOut({ hypotheses, measurements }: Standings): string | null {
  const how = "`weighhouse sensitivity campaign.json` computes it";
  if (measurements.counted > MOST_FOR_SENSITIVITY) {
    return `sensitivity.json: ${formatCount(measurements.counted)} measurements are counted, more than ${formatCount(MOST_FOR_SENSITIVITY)}; ${how}`;
  }
  if (!inClosedForm(hypotheses)) {
    return `sensitivity.json: not every evidence has a closed form, and hundreds of numerical ones take long; ${how}`;
  }
  return null;
}

/** All that is left out, as the manifest and methods.md say it. */
export function leftOutOf(parts: {
  document: CampaignDocument;
  standings: Standings;
  heads: Manifest["heads"];
  hasSensitivity: boolean;
}): string[] {
  const { document, standings, heads, hasSensitivity } = parts;
  const without = hasSensitivity ? null : sensitivityLeftOut(standings);
  const measurands = document.measurands.length;
  return [
    ...(without === null ? [] : [without]),
    ...(heads.kept < heads.signed
      ? [
          `heads: ${formatCount(heads.kept)} of ${formatCount(heads.signed)} signed tree heads are kept (the last, those of citations, of time-stamps and of registration's close, and others evenly); any head that you hold can be checked against the entries`,
        ]
      : []),
    ...(measurands > MOST_MEASURAND_FIGURES
      ? [
          `figures: of the first ${formatCount(MOST_MEASURAND_FIGURES)} of ${formatCount(measurands)} quantities`,
        ]
      : []),
  ];
}
