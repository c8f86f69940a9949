import * as z from "zod";
import { citationCode } from "@weighhouse/campaign/citation-code";
import { line, optional } from "@weighhouse/campaign/fields";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";
import type { Decision, Now } from "./record-entries";
import { standingsAt } from "./read-standings";

export const citeStandingsInput = z.strictObject({ key: z.string(), note: optional(line) });

export type Cited = Appended & {
  /** The address `/cite/{code}` shows exactly these standings for ever. */
  code: string;
};

/** Freezes the standings as they are now under a short code, to be cited in a paper. */
export async function citeStandings(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof citeStandingsInput>,
): Promise<Cited> {
  const { key, note } = parseInput(citeStandingsInput, input);
  const access = await enter(desk, actor, key, "cite-standings");
  let code = "";
  const stored = await recordEntries(desk, access, async (now) => {
    const decided = await citationOf(desk, key, { now, note, by: "hand" });
    code = decided.code;
    return decided;
  });
  return { ...appended(key, stored), code };
}

/** The entry that cites the standings as of all entries before it. */
export async function citationOf(
  desk: Desk,
  campaign: string,
  { now, note, by }: { now: Now; note: string | null; by: "hand" | "clock" },
): Promise<Decision & { code: string }> {
  const { standings, problems } = await standingsAt(desk, campaign, now.size);
  if (standings === null) {
    throw new DeskError("invalid", "the engine refuses the campaign document", {
      problems: problems ?? [],
    });
  }
  const code = citationCode(standings);
  const payload = { code, by, note, standings: standings as Record<string, unknown> };
  return { code, entries: [{ kind: "standings.cited", payload }], fields: [] };
}
