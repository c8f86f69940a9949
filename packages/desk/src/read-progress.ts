import * as z from "zod";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { readStandings } from "@weighhouse/store/standings";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

export const readProgressInput = z.strictObject({ key: z.string() });

export type Progress = {
  /** Entries in the ledger. */
  size: number;
  /** The size that the newest standings are of; null while there are none. */
  scoredSize: number | null;
};

/** How far a campaign is. */
export async function readProgress(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readProgressInput>,
): Promise<Progress> {
  const { key } = parseInput(readProgressInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const engine = ENGINE_VERSION;
  const scored = await readStandings(desk.store, { campaign: key, size: "latest", engine });
  return { size: campaign.size, scoredSize: scored?.size ?? null };
}
