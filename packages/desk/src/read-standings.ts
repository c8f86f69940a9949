import * as z from "zod";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "@weighhouse/engine/score";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { readDocument } from "@weighhouse/store/read-document";
import { readStandings as readKept, saveStandings } from "@weighhouse/store/standings";
import type { Scored } from "@weighhouse/store/standings";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const readStandingsInput = z.strictObject({
  key: z.string(),
  /** As of this many entries; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

export type ReadStandings = {
  standings: Standings;
  /** The size that these standings are of. */
  size: number;
  latestSize: number;
  /** `scoring`: the newest entries are still being scored, these are the last standings before. */
  state: "current" | "scoring";
};

/**
 * The standings as of a size: those that are kept, else scored now and kept. The newest come from
 * the scorer; while it works, the last ones are given and said to be so.
 *
 * @throws {DeskError} `invalid` with problems where the engine refuses the document
 */
export async function readStandings(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readStandingsInput>,
): Promise<ReadStandings> {
  const { key, size } = parseInput(readStandingsInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const engine = ENGINE_VERSION;
  const kept =
    (await readKept(desk.store, { campaign: key, size: size ?? "latest", engine })) ??
    (await scoreNow(desk, key, size));
  if (kept.standings === null) {
    const problems = kept.problems ?? [];
    throw new DeskError("invalid", "the engine refuses the campaign document", { problems });
  }
  const behind = size === undefined && kept.size < campaign.size;
  return {
    standings: kept.standings,
    size: kept.size,
    latestSize: campaign.size,
    state: behind ? "scoring" : "current",
  };
}

type Outcome = Pick<Scored, "size" | "standings" | "problems">;

/** The standings of exactly that size, for who may read them; problems where there are none. */
export async function standingsAt(desk: Desk, key: string, size: number): Promise<Outcome> {
  const kept = await readKept(desk.store, { campaign: key, size, engine: ENGINE_VERSION });
  return kept ?? scoreNow(desk, key, size);
}

async function scoreNow(desk: Desk, key: string, wanted: number | undefined): Promise<Outcome> {
  const { document, size, treeHead } = await onStore(() => readDocument(desk.store, key, wanted));
  const scored = scoreCampaign(document, { asOf: { size, treeHead } });
  const place = { campaign: key, size, engine: ENGINE_VERSION };
  if (!scored.ok) {
    await saveStandings(desk.store, { ...place, problems: scored.problems });
    return { size, standings: null, problems: scored.problems };
  }
  await saveStandings(desk.store, { ...place, standings: scored.value });
  return { size, standings: scored.value, problems: null };
}
