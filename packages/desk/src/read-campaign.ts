import * as z from "zod";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { readDocument } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import type { Role } from "./roles";
import { onStore } from "./store-refusals";

export const readCampaignInput = z.strictObject({
  key: z.string(),
  /** As of this many entries; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

export type ReadCampaign = {
  document: CampaignDocument;
  size: number;
  latestSize: number;
  treeHead: string;
  at: string;
  /** The ledger's id: the origin line of its tree heads. */
  ledger: string;
  role: Role;
  team: string | null;
  clock: "real" | "simulated";
  visibility: "public" | "members";
};

/** The campaign document as of a size of its ledger, and what the actor is in the campaign. */
export async function readCampaign(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readCampaignInput>,
): Promise<ReadCampaign> {
  const { key, size } = parseInput(readCampaignInput, input);
  const { campaign, role, team } = await enter(desk, actor, key, "read-campaign");
  const read = await onStore(() => readDocument(desk.store, key, size));
  const { ledger, clock, visibility } = campaign;
  return { ...read, ledger, role, team, clock, visibility };
}
