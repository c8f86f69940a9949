import type { CampaignDocument } from "@weighhouse/campaign/document";
import { problemLine } from "@weighhouse/campaign/problem";
import { readCampaign } from "@weighhouse/campaign/read";
import { utf8 } from "@weighhouse/ledger/bytes";
import { readJson } from "./archive-text";
import type { Files } from "./container";
import { counted, failed, judged } from "./line";
import type { Checked } from "./line";
import { compareJson } from "./differences";
import { DOCUMENT, jsonText } from "../layout";

/**
 * `campaign.json` is what the entries add up to, and that is a campaign.
 *
 * @param folded the document from the entries
 * @returns it, where an engine may be asked to score it
 */
export function checkDocument(files: Files, folded: CampaignDocument): Checked<CampaignDocument> {
  const check = "campaign document";
  // There is one form only, so its size is known; a forger's may be longer, not without end.
  const read = readJson(files, DOCUMENT, 2 * utf8(jsonText(folded)).length + 2 ** 16);
  if (!read.ok) return { line: failed(check, read.fault), value: folded };
  const { differences } = compareJson(read.value, folded, { tolerance: 0 });
  const fits = readCampaign(folded);
  const problems = fits.ok ? [] : fits.problems.map(problemLine);
  if (problems.length > 0) {
    // No engine is asked to score what no campaign can be.
    const places = problems.map((problem) => `the entries add up to no campaign: ${problem}`);
    return { line: failed(check, places), value: null };
  }
  const detail = `${counted(folded.hypotheses.length, "hypothesis", "hypotheses")} and ${counted(folded.measurements.length, "measurement")}, folded from the entries`;
  return {
    line: judged(
      check,
      differences.map((difference) => `${DOCUMENT}, ${difference}`),
      detail,
    ),
    value: folded,
  };
}
