import type { CampaignDocument } from "@weighhouse/campaign/document";
import { problemLine } from "@weighhouse/campaign/problem";
import type { Result } from "@weighhouse/campaign/problem";
import { standingsSchema } from "@weighhouse/campaign/standings";
import type { Standings } from "@weighhouse/campaign/standings";
import { readJson } from "./archive-text";
import type { Files } from "./container";
import { failed, judged } from "./line";
import type { Checked } from "./line";
import { compareJson } from "./differences";
import { statedErrors } from "./differences-within";
import { inClosedForm } from "../closed-form";
import { STANDINGS } from "../layout";

/** The engine, as far as an archive needs it. */
export type Score = (
  document: CampaignDocument,
  options: { asOf: Standings["asOf"] },
) => Result<Standings>;

/** Closed forms agree to this on every machine: |a - b| <= 1e-9 * max(1, |a|, |b|). */
export const TOLERANCE = 1e-9;

/** The standings in the archive, where they have the standings' form; null otherwise. */
export function readStandings(files: Files): { standings: Standings | null; fault: string | null } {
  const read = readJson(files, STANDINGS);
  if (!read.ok) return { standings: null, fault: read.fault };
  const parsed = standingsSchema.safeParse(read.value);
  if (parsed.success) return { standings: parsed.data, fault: null };
  const issue = parsed.error.issues[0];
  const pointer = (issue?.path ?? []).map((step) => `/${String(step)}`).join("");
  return { standings: null, fault: `${STANDINGS}, ${pointer || "(document)"}: ${issue?.message}` };
}

/** Every number, word and key of `standings.json` is what the engine computes from the document. */
export function checkStandings(
  files: Files,
  computed: { document: CampaignDocument; asOf: Standings["asOf"] },
  score: Score,
): Checked<Standings> {
  const check = "standings";
  const { standings, fault } = readStandings(files);
  if (standings === null) return { line: failed(check, fault as string), value: null };
  const scored = attempt(() => score(computed.document, { asOf: computed.asOf }));
  if (typeof scored === "string") {
    return { line: failed(check, `the document can't be scored: ${scored}`), value: standings };
  }
  if (!scored.ok) {
    const problems = scored.problems.map(problemLine);
    return { line: failed(check, ["the document can't be scored", ...problems]), value: standings };
  }
  const sameEngine = standings.engine === scored.value.engine;
  const { numbers, differences } = compareJson(standings, scored.value, {
    tolerance: TOLERANCE,
    within: statedErrors(scored.value),
    // Another engine may word its warnings otherwise; its name is said below.
    passOver: (pointer) =>
      !sameEngine && (pointer === "/engine" || /^\/warnings\/\d+\/text$/.test(pointer)),
  });
  const engines = sameEngine
    ? `engine ${standings.engine}`
    : `engine ${standings.engine} in the archive, ${scored.value.engine} here`;
  const faults = differences.map((difference) => `${STANDINGS}, ${difference}`);
  if (faults.length > 0 && !sameEngine) faults.unshift(engines);
  const how = inClosedForm(scored.value.hypotheses)
    ? "all within 1e-9"
    : "closed forms within 1e-9, integrated ones within their stated errors";
  return {
    line: judged(check, faults, `${numbers} numbers computed anew, ${how}; ${engines}`),
    value: standings,
  };
}

/** A forged document may be one that no engine was written for: that is an answer, not a crash. */
export function attempt<T>(score: () => Result<T>): Result<T> | string {
  try {
    return score();
  } catch (error) {
    return (error as Error).message;
  }
}
