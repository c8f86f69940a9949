import * as z from "zod";
import { readPartsOf } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const readCitationsInput = z.strictObject({ key: z.string() });

export type ListedCitation = {
  code: string;
  by: "hand" | "clock";
  note: string | null;
  /** The entry that cites, and its time. */
  seq: number;
  at: string;
};

/** The standings of a campaign that were cited, oldest first. */
export async function readCitations(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readCitationsInput>,
): Promise<ListedCitation[]> {
  const { key } = parseInput(readCitationsInput, input);
  await enter(desk, actor, key, "read-campaign");
  const parts = await onStore(() => readPartsOf(desk.store, { campaign: key, part: "citation" }));
  return parts.map(({ content }) => content as ListedCitation);
}
