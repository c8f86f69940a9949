import * as z from "zod";
import { readDeclarations } from "@weighhouse/store/read-document";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { measurementSource } from "./measurement-source";
import { parseInput } from "./parse-input";
import { postTable } from "./post-table";
import { readRows } from "./read-rows";
import { inDrafts, inText } from "./row-source";
import { onStore } from "./store-refusals";

export const postMeasurementsInput = z.strictObject({
  key: z.string(),
  source: measurementSource,
});

export type PostedMeasurements = {
  key: string;
  /** Ids of the measurements that were entered. */
  posted: string[];
  /** Ids of those that were there already with the same content. */
  alreadyThere: string[];
  /** The entries that were made; null where everything was there already. */
  appended: Appended | null;
};

/**
 * Enters measurements, all of them or none.
 *
 * @throws {DeskError} `invalid` with a problem for each field that is refused; `conflict` with one
 *   for each measurement whose id is taken by another content
 */
export async function postMeasurements(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof postMeasurementsInput>,
): Promise<PostedMeasurements> {
  const { key, source } = parseInput(postMeasurementsInput, input);
  const access = await enter(desk, actor, key, "post-measurements");
  const { document } = await onStore(() => readDeclarations(desk.store, key));
  const table = readRows(source, document);
  const place = source.from === "drafts" ? inDrafts("/source/drafts") : inText("/source/text");
  const posted = await postTable(desk, access, { document, table, place, correlations: [] });
  return {
    key,
    posted: posted.posted,
    alreadyThere: posted.alreadyThere,
    appended: posted.appended && appended(key, posted.appended),
  };
}
