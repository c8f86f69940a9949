import * as z from "zod";
import { readPartsOf } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const readRetiredInput = z.strictObject({
  key: z.string(),
  /** As of this many entries; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

export type Retired = { hypothesis: string; at: string; reason: string };

/** The hypotheses that their teams stand behind no more: the document holds them as before. */
export async function readRetired(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readRetiredInput>,
): Promise<Retired[]> {
  const { key, size } = parseInput(readRetiredInput, input);
  await enter(desk, actor, key, "read-campaign");
  const parts = await onStore(() =>
    readPartsOf(desk.store, { campaign: key, part: "hypothesis", size }),
  );
  return parts.flatMap(({ key: hypothesis, content }) => {
    const retired = (content["retired"] ?? null) as Omit<Retired, "hypothesis"> | null;
    return retired === null ? [] : [{ hypothesis, ...retired }];
  });
}
