import { readCandidatesText, type Candidate } from "@weighhouse/campaign/candidates";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { decode, invalid, readBytes } from "./document-file";
import { wrongUsage } from "./refusal";

/**
 * Reads the candidates of a campaign.
 *
 * @throws {Refusal} 2 where there is no such file, 1 with everything wrong in it
 */
export async function readCandidatesFile(
  path: string | undefined,
  document: CampaignDocument,
): Promise<Candidate[]> {
  if (path === undefined) throw wrongUsage("found no --candidates; allowed --candidates FILE");
  const read = readCandidatesText(decode(await readBytes(path)), document);
  if (!read.ok) throw invalid(read.problems);
  return read.value;
}
