import { createHash } from "node:crypto";
import * as z from "zod";
import { layoutText } from "@weighhouse/tables/layout";
import { tableChoicesSchema } from "@weighhouse/tables/table-match";
import type { TableChoices } from "@weighhouse/tables/table-match";
import { MAX_COLUMNS } from "@weighhouse/tables/limits";
import { findMatches } from "@weighhouse/store/remembered-matches";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

/** A table's columns as far as they tell one layout from another: a unit that changed is another. */
export const layoutSchema = z
  .array(z.object({ name: z.string().max(1000), unit: z.string().max(1000).nullable() }))
  .min(1)
  .max(MAX_COLUMNS);
export type Layout = z.output<typeof layoutSchema>;

export const readMatchesInput = z.strictObject({ key: z.string(), columns: layoutSchema });

export type RememberedChoices = {
  facility: string;
  choices: TableChoices;
  rememberedAt: string;
};

/** What is remembered of tables with these columns, by facility. */
export async function readMatches(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readMatchesInput>,
): Promise<RememberedChoices[]> {
  const { key, columns } = parseInput(readMatchesInput, input);
  await enter(desk, actor, key, "preview-measurements");
  return rememberedOf(desk, key, layoutDigest(columns));
}

/** What is remembered for a facility's tables with these columns; null where nothing is. */
export async function readMatch(
  desk: Desk,
  { key, facility, columns }: { key: string; facility: string; columns: Layout },
): Promise<TableChoices | null> {
  const all = await rememberedOf(desk, key, layoutDigest(columns));
  return all.find((match) => match.facility === facility)?.choices ?? null;
}

export function layoutDigest(columns: Layout): string {
  return createHash("sha256").update(layoutText(columns)).digest("hex");
}

/**
 * What is remembered of a layout, by its digest. What an older version kept in another form is as if
 * it had never been remembered.
 */
export async function rememberedOf(
  desk: Desk,
  key: string,
  layout: string,
): Promise<RememberedChoices[]> {
  const found = await findMatches(desk.store, key, layout);
  return found.flatMap(({ facility, choices, rememberedAt }) => {
    const read = tableChoicesSchema.safeParse(JSON.parse(choices));
    return read.success ? [{ facility, choices: read.data, rememberedAt }] : [];
  });
}
