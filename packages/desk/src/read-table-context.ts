import * as z from "zod";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { sha256 } from "@weighhouse/campaign/seals";
import { readDeclarations } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { rememberedOf } from "./read-match";
import type { RememberedChoices } from "./read-match";
import { onStore } from "./store-refusals";

export const readTableContextInput = z.strictObject({
  key: z.string(),
  /** SHA-256 of a table's columns, for what is remembered of such tables. */
  layout: sha256.optional(),
});

export type ReadTableContext = Pick<
  CampaignDocument,
  "observables" | "measurands" | "facilities"
> & { remembered: RememberedChoices[] };

/** What a table's columns are matched by before it is posted: a program reads its tables itself. */
export async function readTableContext(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readTableContextInput>,
): Promise<ReadTableContext> {
  const { key, layout } = parseInput(readTableContextInput, input);
  await enter(desk, actor, key, "preview-measurements");
  const [{ document }, remembered] = await Promise.all([
    onStore(() => readDeclarations(desk.store, key)),
    layout === undefined ? [] : rememberedOf(desk, key, layout),
  ]);
  const { observables, measurands, facilities } = document;
  return { observables, measurands, facilities, remembered };
}
