import { readFileSync } from "node:fs";
import { readCampaignText } from "@weighhouse/campaign/read";
import type { CampaignDocument } from "@weighhouse/campaign/document";

// Published values: Dyson, Eddington & Davidson, Phil. Trans. R. Soc. A 220 (1920) 291-333, see
// test/reference/README.md.

const folder = new URL("../../../../test/reference/campaigns/", import.meta.url);

export const eclipseText = readFileSync(new URL("eclipse-1919.json", folder), "utf8");

export function eclipseDocument(): CampaignDocument {
  const read = readCampaignText(eclipseText);
  if (!read.ok) throw new Error("the reference campaign doesn't read");
  return read.value;
}

type Expected = {
  chiSquare: number;
  degreesOfFreedom: number;
  pValue: number;
  lnEvidence: number;
  log10BayesFactor: number;
  posterior: number;
};

export const eclipseExpected = JSON.parse(
  readFileSync(new URL("eclipse-1919.expected.json", folder), "utf8"),
) as {
  hypotheses: Record<string, Expected>;
  combined: { value: number; sd: number };
  verdicts: Record<string, string>;
};
