import * as z from "zod";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { measurementId } from "@weighhouse/campaign/fields";
import { readEntry } from "@weighhouse/store/read-ledger";
import { readMeasurementVersions } from "@weighhouse/store/read-measurement-versions";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { authorName, memberNames } from "./read-entries";

export const readMeasurementHistoryInput = z.strictObject({
  key: z.string(),
  id: measurementId,
  /** As of this many entries; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

/** One version of a measurement: the entry that made it, and what it says since. */
export type MeasurementVersion = {
  seq: number;
  at: string;
  kind: EntryKind;
  /** Who made it, by name; null for the system and for a person who was forgotten. */
  name: string | null;
  team: string | null;
  /** Whether who asks made it. */
  own: boolean;
  /** Why it was corrected, withdrawn or set aside; null for its posting. */
  reason: string | null;
  withdrawn: boolean;
  measurement: MeasurementContent & { postedAt: string };
};

/** All that a measurement ever was, oldest first. */
export async function readMeasurementHistory(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readMeasurementHistoryInput>,
): Promise<MeasurementVersion[]> {
  const { key, id, size } = parseInput(readMeasurementHistoryInput, input);
  const { campaign, member } = await enter(desk, actor, key, "read-campaign");
  const [versions, names] = await Promise.all([
    readMeasurementVersions(desk.store, { campaign: key, id, size: size ?? campaign.size }),
    memberNames(desk, key),
  ]);
  if (versions.length === 0) {
    throw new DeskError("not-found", `found no measurement ${id} in the campaign`);
  }
  return Promise.all(
    versions.map(async ({ seq, content }) => {
      const { entry, payload } = await readEntry(desk.store, { campaign: key, seq });
      const { reason = null } = JSON.parse(payload) as { reason?: string };
      const { withdrawn = null, ...measurement } = content;
      return {
        seq,
        at: entry.at,
        kind: entry.kind as EntryKind,
        name: authorName(entry.by, names),
        team: "system" in entry.by ? null : entry.by.team,
        own: member !== null && "member" in entry.by && entry.by.member === member,
        reason,
        withdrawn: withdrawn !== null,
        measurement: measurement as MeasurementVersion["measurement"],
      };
    }),
  );
}
