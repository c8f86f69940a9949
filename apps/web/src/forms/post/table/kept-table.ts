import type { TableChoices } from "@weighhouse/tables/table-match";
import { tableChoicesSchema } from "@weighhouse/tables/table-match";
import { del, get, set } from "idb-keyval";

/** A table that was brought in and is not posted yet, with what was chosen for it. */
export interface KeptTable {
  name: string;
  file: Blob;
  choices: TableChoices;
  savedAt: string;
}

// A hundred thousand rows don't fit where what is typed is kept; the browser's database takes them.
const placeOf = (campaign: string) => `weighhouse:table:${campaign}`;

/** Whether the browser keeps it: one that forbids it or is full does not. */
export async function keepTable(campaign: string, table: KeptTable): Promise<boolean> {
  try {
    await set(placeOf(campaign), table);
    return true;
  } catch {
    return false;
  }
}

export async function keptTable(campaign: string): Promise<KeptTable | null> {
  try {
    const kept = (await get(placeOf(campaign))) as Partial<KeptTable> | undefined;
    const choices = tableChoicesSchema.safeParse(kept?.choices);
    if (kept === undefined || !(kept.file instanceof Blob) || !choices.success) return null;
    const { name = "", file, savedAt = "" } = kept;
    return { name, file, choices: choices.data, savedAt };
  } catch {
    return null;
  }
}

export async function dropTable(campaign: string): Promise<void> {
  try {
    await del(placeOf(campaign));
  } catch {
    // A browser that forbids it has kept nothing.
  }
}
