import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";

type Parts = "observables" | "measurands" | "sharedErrors" | "facilities" | "teams" | "hypotheses";

/**
 * What is wrong with a new part within its campaign (an unknown key, a value that its scale does
 * not allow): the whole document with the part is read as the server will read it, and the
 * problems at the part are kept, with pointers into the part.
 *
 * @param replaces the key of the part that it takes the place of, when amending
 */
export async function problemsInCampaign(
  document: CampaignDocument,
  options: { list: Parts; part: unknown; replaces?: string | null },
): Promise<Problem[]> {
  const { readCampaign } = await import("@weighhouse/campaign/read");
  const { list, part, replaces = null } = options;
  const others = document[list].filter((each) => each.key !== replaces);
  const { claimed: _claimed, ...content } = part as { claimed?: unknown };
  const result = readCampaign({
    ...document,
    // Measurements were accepted before and no new declaration can unmake them.
    measurements: [],
    correlations: [],
    [list]: [...others, content],
  });
  if (result.ok) return [];
  const at = `/${list}/${others.length}`;
  return result.problems
    .filter(({ pointer }) => pointer === at || pointer.startsWith(`${at}/`))
    .map((problem) => ({ ...problem, pointer: problem.pointer.slice(at.length) }));
}
