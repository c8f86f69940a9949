import * as z from "zod";
import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import type { Payload } from "@weighhouse/campaign/entries";
import type { Problem } from "@weighhouse/campaign/problem";
import { scoreCampaign } from "@weighhouse/engine/score";
import { enter } from "./access";
import type { Access } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import { checkAfter } from "./check-after";
import type { Actor, Desk } from "./desk";
import { invalid } from "./desk-error";
import { requireOwnMeasurements, requireTeamFor } from "./own-measurements";
import { parseInput } from "./parse-input";
import { authorOf, readNow, recordEntries } from "./record-entries";
import type { Decision, Now } from "./record-entries";
import { differingFields } from "./same-content";
import type { FieldChange } from "./same-content";
import { standingsChanges } from "./standings-changes";
import type { StandingsChanges } from "./standings-changes";
import { timeAt } from "./time";

const action = "correct-measurement";
export const MOST_CORRECTIONS = 10_000;

export const correctMeasurementsInput = z.strictObject({
  key: z.string(),
  /** `team` of a measurement may be left out: as it was. */
  corrections: z.array(payloadSchemas["measurement.corrected"]).min(1).max(MOST_CORRECTIONS),
});

type Correction = Payload<"measurement.corrected">;

export type CorrectedMeasurements = {
  key: string;
  /** Ids of what was corrected, and of what was so already. */
  corrected: string[];
  unchanged: string[];
  /** Null where everything was so already. */
  appended: Appended | null;
};

export type CorrectionsPreview = {
  size: number;
  corrections: { id: string; fields: FieldChange[] }[];
  /** What they would change; null where they would change nothing. */
  changes: StandingsChanges | null;
};

/**
 * Gives measurements new contents, each for a stated reason, all of them or none. What they were
 * before stays on record; one that is so already makes no entry.
 *
 * @throws {DeskError} `invalid` with a problem for each that isn't there or can't be so
 */
export async function correctMeasurements(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof correctMeasurementsInput>,
): Promise<CorrectedMeasurements> {
  const { key, corrections } = parseInput(correctMeasurementsInput, input);
  const access = await enter(desk, actor, key, action);
  const ids = corrections.map(({ measurement }) => measurement.id);
  const now = await readNow(desk, key);
  if ((await decideAll(desk, access, { now, corrections })).entries.length === 0) {
    return { key, corrected: [], unchanged: ids, appended: null };
  }
  let corrected: string[] = [];
  const stored = await recordEntries(desk, access, async (now) => {
    const decision = await decideAll(desk, access, { now, corrections });
    corrected = decision.fields.map((field) => field.key);
    return decision;
  });
  const done = new Set(corrected);
  const unchanged = ids.filter((id) => !done.has(id));
  return { key, corrected, unchanged, appended: appended(key, stored) };
}

/** What corrections would change, of the measurements and of the standings. Enters nothing. */
export async function previewCorrections(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof correctMeasurementsInput>,
): Promise<CorrectionsPreview> {
  const { key, corrections } = parseInput(correctMeasurementsInput, input);
  const access = await enter(desk, actor, key, action);
  const now = await readNow(desk, key);
  const { size, document, parts } = now;
  const decision = await decideAll(desk, access, { now, corrections });
  const there = byId(document);
  const rows = corrections.map((correction) => {
    const before = there.get(correction.measurement.id)!;
    const corrected = contentOf(correction, before);
    return { id: before.id, fields: differingFields(corrected, before, document) };
  });
  if (decision.entries.length === 0) return { size, corrections: rows, changes: null };
  const moment = { by: authorOf(access), at: timeAt(desk), size };
  const after = checkAfter(parts, decision.entries, { ...moment, fields: decision.fields });
  const scored = { before: scoreCampaign(document), after: scoreCampaign(after) };
  const changes =
    scored.before.ok && scored.after.ok
      ? standingsChanges(scored.before.value, scored.after.value)
      : null;
  return { size, corrections: rows, changes };
}

/** The entries of those that say something new, and where each stands in the document. */
async function decideAll(
  desk: Desk,
  access: Access,
  { now, corrections }: { now: Now; corrections: Correction[] },
): Promise<Decision> {
  const there = byId(now.document);
  refuseUnknown(corrections, there);
  const owned = corrections.map(({ measurement: { id } }) => there.get(id)!);
  await requireOwnMeasurements(desk, access, { action, measurements: owned });
  const decisions = corrections.flatMap((correction, index) => {
    const before = there.get(correction.measurement.id)!;
    const measurement = contentOf(correction, before);
    requireTeamFor(access, action, measurement.team);
    if (differingFields(measurement, before, now.document).length === 0) return [];
    const pointer = `/corrections/${index}/measurement`;
    const payload = { measurement, reason: correction.reason };
    return {
      entry: { kind: "measurement.corrected", payload } as const,
      field: { list: "measurements", key: measurement.id, pointer } as const,
    };
  });
  return {
    entries: decisions.map(({ entry }) => entry),
    fields: decisions.map(({ field }) => field),
  };
}

function contentOf({ measurement }: Correction, before: Measurement) {
  return { ...measurement, team: measurement.team ?? before.team };
}

function byId({ measurements }: CampaignDocument): Map<string, Measurement> {
  return new Map(measurements.map((one) => [one.id, one]));
}

/** Names every id that isn't there, and every one that stands twice. */
function refuseUnknown(corrections: Correction[], there: Map<string, Measurement>): void {
  const first = new Map<string, number>();
  const problems = corrections.flatMap(({ measurement: { id } }, index): Problem[] => {
    const pointer = `/corrections/${index}/measurement/id`;
    const earlier = first.get(id);
    if (earlier !== undefined) {
      const found = `${id}, as at /corrections/${earlier}`;
      return [{ pointer, code: "duplicate", found, allowed: "each measurement once" }];
    }
    first.set(id, index);
    if (there.has(id)) return [];
    const allowed = "a measurement that is there, and not withdrawn";
    return [{ pointer, code: "unknown-key", found: id, allowed }];
  });
  if (problems.length > 0) throw invalid(problems);
}
