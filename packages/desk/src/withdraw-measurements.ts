import * as z from "zod";
import {
  payloadSchemas,
  MEASUREMENTS_PER_ENTRY,
  selectionSchema,
} from "@weighhouse/campaign/entries";
import { measurementId } from "@weighhouse/campaign/fields";
import { Parts } from "@weighhouse/campaign/parts";
import type { Part } from "@weighhouse/campaign/parts";
import { isWithin, selectedMeasurements } from "@weighhouse/campaign/selection";
import { scoreCampaign } from "@weighhouse/engine/score";
import { enter } from "./access";
import type { Access } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { invalid } from "./desk-error";
import { documentAfter } from "./document-after";
import type { NewEntry } from "./document-after";
import { requireOwnMeasurements } from "./own-measurements";
import { parseInput } from "./parse-input";
import { authorOf, readNow, recordEntries } from "./record-entries";
import type { Now } from "./record-entries";
import { standingsChanges } from "./standings-changes";
import type { StandingsChanges } from "./standings-changes";
import { timeAt } from "./time";

const action = "withdraw-measurements";
const [, ofFacility] = selectionSchema.options;

/**
 * By ids, as many as one likes, or those observed within a range (ends included), a facility's or
 * all.
 */
const selection = z.discriminatedUnion("by", [
  z.strictObject({ by: z.literal("ids"), ids: z.array(measurementId).min(1) }),
  ofFacility,
  ofFacility.omit({ facility: true }).extend({ by: z.literal("range") }),
]);
type Wanted = z.output<typeof selection>;

export const withdrawMeasurementsInput = z.strictObject({
  key: z.string(),
  selection,
  reason: payloadSchemas["measurements.withdrawn"].shape.reason,
});
export const previewWithdrawalInput = withdrawMeasurementsInput.omit({ reason: true });

export type WithdrawalPreview = {
  size: number;
  /** Ids of what would be withdrawn. */
  ids: string[];
  /** What it would change; null where the standings can't be computed. */
  changes: StandingsChanges | null;
};

/** Withdraws measurements: the standings are as if they had never been posted, the ledger is not. */
export async function withdrawMeasurements(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof withdrawMeasurementsInput>,
): Promise<Appended> {
  const { key, selection, reason } = parseInput(withdrawMeasurementsInput, input);
  const access = await enter(desk, actor, key, action);
  const stored = await recordEntries(desk, access, async ({ parts }) => {
    const ids = await idsOf(desk, access, { parts, selection });
    return { entries: withdrawalEntries({ selection, ids, reason }), fields: [], pointer: "" };
  });
  return appended(key, stored);
}

/** What a withdrawal would take, and what it would change. Enters nothing. */
export async function previewWithdrawal(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof previewWithdrawalInput>,
): Promise<WithdrawalPreview> {
  const { key, selection } = parseInput(previewWithdrawalInput, input);
  const access = await enter(desk, actor, key, action);
  const { parts, document, size } = await readNow(desk, key);
  const ids = await idsOf(desk, access, { parts, selection });
  const moment = { by: authorOf(access), at: timeAt(desk), size };
  const entries = withdrawalEntries({ selection, ids, reason: "-" });
  const before = scoreCampaign(document);
  const after = scoreCampaign(documentAfter(parts, entries, moment));
  const changes = before.ok && after.ok ? standingsChanges(before.value, after.value) : null;
  return { size, ids, changes };
}

/** Refuses a selection of nothing, of what isn't there, and of what is another's. */
async function idsOf(
  desk: Desk,
  access: Access,
  { parts, selection }: { parts: Now["parts"]; selection: Wanted },
): Promise<string[]> {
  const selected = selectedParts(parts, selection);
  const found = new Set(selected.map(({ key }) => key));
  if (selection.by === "ids") {
    const unknown = selection.ids.flatMap((id, index) => (found.has(id) ? [] : [{ id, index }]));
    if (unknown.length > 0) {
      throw invalid(
        unknown.map(({ id, index }) => ({
          pointer: `/selection/ids/${index}`,
          code: "unknown-key",
          found: id,
          allowed: "a measurement that is there, and not withdrawn yet",
        })),
      );
    }
  } else if (found.size === 0) {
    const allowed = "a range with a measurement or more";
    throw invalid([
      { pointer: "/selection", code: "unknown-key", found: "no measurement", allowed },
    ]);
  }
  const measurements = selected.map(({ key: id, content }) => ({
    id,
    team: (content["team"] ?? null) as string | null,
  }));
  await requireOwnMeasurements(desk, access, { action, measurements });
  return [...found];
}

function selectedParts(parts: Now["parts"], selection: Wanted): Part[] {
  if (selection.by !== "range") return selectedMeasurements(selection, new Parts(parts));
  return parts.filter(
    ({ part, content }) => part === "measurement" && isWithin(content, selection),
  );
}

/** A facility's are named by the facility and the range, all others by their ids. */
function withdrawalEntries(of: { selection: Wanted; ids: string[]; reason: string }): NewEntry[] {
  const { selection, ids, reason } = of;
  if (selection.by === "facility") {
    return [{ kind: "measurements.withdrawn", payload: { selection, reason } }];
  }
  const entries: NewEntry[] = [];
  for (let from = 0; from < ids.length; from += MEASUREMENTS_PER_ENTRY) {
    const some = { by: "ids" as const, ids: ids.slice(from, from + MEASUREMENTS_PER_ENTRY) };
    entries.push({ kind: "measurements.withdrawn", payload: { selection: some, reason } });
  }
  return entries;
}
