import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import { problemLine } from "@weighhouse/campaign/problem";
import type { Sensitivity } from "@weighhouse/campaign/sensitivity";
import type { Standings } from "@weighhouse/campaign/standings";
import { readJson } from "./archive-text";
import type { Files } from "./container";
import { compareJson } from "./differences";
import { counted, failed, judged, notPresent } from "./line";
import type { CheckLine } from "./line";
import { attempt, TOLERANCE } from "./standings";
import { SENSITIVITY } from "../layout";
import { sensitivityLeftOut } from "../left-out";

/** The engine's sensitivity, as far as an archive needs it. */
export type Sense = (document: CampaignDocument) => Result<Sensitivity>;

/**
 * Every number of `sensitivity.json` is what the engine computes; an archive may lack it only where it
 * would take long, and its manifest then says so.
 */
export function checkSensitivity(
  files: Files,
  { document, standings }: { document: CampaignDocument; standings: Standings },
  sense: Sense,
): CheckLine {
  const check = "sensitivity";
  if (!files.has(SENSITIVITY)) {
    const why = sensitivityLeftOut(standings);
    return why === null ? failed(check, `${SENSITIVITY} is missing`) : notPresent(check, why);
  }
  const read = readJson(files, SENSITIVITY);
  if (!read.ok) return failed(check, read.fault);
  const computed = attempt(() => sense(document));
  if (typeof computed === "string") return failed(check, computed);
  if (!computed.ok) return failed(check, computed.problems.map(problemLine));
  const { engine } = read.value as Partial<Sensitivity>;
  const sameEngine = engine === computed.value.engine;
  const errors = standings.hypotheses.map(({ lnEvidenceError }) => lnEvidenceError);
  // Every row is a scoring of its own, with errors like those of the standings.
  const within = 5 * Math.SQRT2 * Math.hypot(...errors, ...errors);
  const { numbers, differences } = compareJson(read.value, computed.value, {
    tolerance: TOLERANCE,
    within: () => within,
    passOver: (pointer) => !sameEngine && (pointer === "/engine" || pointer === "/finding"),
  });
  const faults = differences.map((difference) => `${SENSITIVITY}, ${difference}`);
  const engines = `engine ${engine} in the archive, ${computed.value.engine} here`;
  if (!sameEngine && faults.length > 0) faults.unshift(engines);
  const changes = counted(computed.value.changes.length, "change");
  const how = sameEngine ? `engine ${engine}` : engines;
  return judged(check, faults, `${changes}, ${numbers} numbers computed anew; ${how}`);
}
