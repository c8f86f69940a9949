import * as z from "zod";
import { key as keySchema } from "@weighhouse/campaign/fields";
import { tableChoicesSchema } from "@weighhouse/tables/table-match";
import type { TableChoices } from "@weighhouse/tables/table-match";
import { dropMatch, keepMatch } from "@weighhouse/store/remembered-matches";
import { readDeclarations } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { invalid } from "./desk-error";
import { parseInput } from "./parse-input";
import { layoutDigest, layoutSchema } from "./read-match";
import type { Layout } from "./read-match";
import { onStore } from "./store-refusals";

const place = { key: z.string(), facility: keySchema, columns: layoutSchema };

export const rememberMatchInput = z.strictObject({ ...place, choices: tableChoicesSchema });
export const forgetMatchInput = z.strictObject(place);

/**
 * Keeps how a facility's tables with these columns are read. Where nothing was chosen there is
 * nothing to keep, and what was remembered before is forgotten.
 */
export async function rememberMatch(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof rememberMatchInput>,
): Promise<{ remembered: boolean }> {
  const { key, facility, columns, choices: chosen } = parseInput(rememberMatchInput, input);
  // The form's reader leaves absent what has a default.
  const choices = tableChoicesSchema.parse(chosen);
  await enter(desk, actor, key, "post-measurements");
  await requireFacility(desk, key, facility);
  requireColumns(choices, columns);
  const at = { facility, columns: layoutDigest(columns) };
  if (isEmpty(choices)) {
    await dropMatch(desk.store, key, at);
    return { remembered: false };
  }
  await keepMatch(desk.store, key, { ...at, choices: JSON.stringify(choices) });
  return { remembered: true };
}

/** Forgets how a facility's tables with these columns are read; whether anything was remembered. */
export async function forgetMatch(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof forgetMatchInput>,
): Promise<{ forgotten: boolean }> {
  const { key, facility, columns } = parseInput(forgetMatchInput, input);
  await enter(desk, actor, key, "post-measurements");
  const at = { facility, columns: layoutDigest(columns) };
  return { forgotten: await dropMatch(desk.store, key, at) };
}

async function requireFacility(desk: Desk, key: string, facility: string): Promise<void> {
  const { document } = await onStore(() => readDeclarations(desk.store, key));
  if (document.facilities.some((one) => one.key === facility)) return;
  const allowed = "a facility that is declared";
  throw invalid([{ pointer: "/facility", code: "unknown-key", found: facility, allowed }]);
}

function requireColumns(choices: TableChoices, columns: Layout): void {
  const names = new Set(columns.map(({ name }) => name));
  const strange = (["columns", "units", "times"] as const).flatMap((part) =>
    Object.keys(choices[part])
      .filter((name) => !names.has(name))
      .map((name) => ({ part, name })),
  );
  if (strange.length === 0) return;
  throw invalid(
    strange.map(({ part, name }) => ({
      pointer: `/choices/${part}`,
      code: "unknown-key",
      found: `the column ${name}`,
      allowed: "a column of the table",
    })),
  );
}

function isEmpty({ columns, units, times, decimal, limits }: TableChoices): boolean {
  const none = [columns, units, times].every((part) => Object.keys(part).length === 0);
  return none && decimal === null && limits === null;
}
