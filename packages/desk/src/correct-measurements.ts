import * as z from "zod";
import type { Measurement } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import { scoreCampaign } from "@weighhouse/engine/score";
import { enter } from "./access";
import type { Access } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import { checkAfter } from "./check-after";
import { correctedContents, correctionSchema, leftOutSchema } from "./corrected-contents";
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
  corrections: z.array(correctionSchema).min(1).max(MOST_CORRECTIONS),
  /** What becomes of fields that a measurement leaves out: their default unless they are kept. */
  leftOut: leftOutSchema.optional(),
});

type Wanted = Pick<z.output<typeof correctMeasurementsInput>, "corrections" | "leftOut">;

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
  const { key, ...wanted } = parseInput(correctMeasurementsInput, input);
  const access = await enter(desk, actor, key, action);
  const ids = wanted.corrections.map(idOf);
  const now = await readNow(desk, key);
  if ((await decide(desk, access, { now, wanted })).entries.length === 0) {
    return { key, corrected: [], unchanged: ids, appended: null };
  }
  let corrected: string[] = [];
  const stored = await recordEntries(desk, access, async (now) => {
    const decision = await decide(desk, access, { now, wanted });
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
  const { key, ...wanted } = parseInput(correctMeasurementsInput, input);
  const access = await enter(desk, actor, key, action);
  const now = await readNow(desk, key);
  const { size, document, parts } = now;
  const { corrections, ...decision } = await decide(desk, access, { now, wanted });
  if (decision.entries.length === 0) return { size, corrections, changes: null };
  const moment = { by: authorOf(access), at: timeAt(desk), size };
  const after = checkAfter(parts, decision.entries, { ...moment, fields: decision.fields });
  const scored = { before: scoreCampaign(document), after: scoreCampaign(after) };
  const changes =
    scored.before.ok && scored.after.ok
      ? standingsChanges(scored.before.value, scored.after.value)
      : null;
  return { size, corrections, changes };
}

/** The entries of those that say something new, and where each stands in the document. */
async function decide(
  desk: Desk,
  access: Access,
  { now: { document }, wanted }: { now: Now; wanted: Wanted },
): Promise<Decision & Pick<CorrectionsPreview, "corrections">> {
  const there = new Map(document.measurements.map((one) => [one.id, one]));
  refuseUnknown(wanted.corrections, there);
  const owned = wanted.corrections.map((one) => there.get(idOf(one))!);
  await requireOwnMeasurements(desk, access, { action, measurements: owned });
  const contents = correctedContents(wanted.corrections, there, wanted.leftOut ?? "default");
  for (const { measurement } of contents) requireTeamFor(access, action, measurement.team);
  const corrections = contents.map(({ measurement }) => ({
    id: measurement.id,
    fields: differingFields(measurement, there.get(measurement.id)!, document),
  }));
  const differing = contents
    .map((content, index) => ({ content, index }))
    .filter(({ index }) => corrections[index]!.fields.length > 0);
  return {
    corrections,
    entries: differing.map(({ content: payload }) => ({ kind: "measurement.corrected", payload })),
    fields: differing.map(({ content, index }) => ({
      list: "measurements",
      key: content.measurement.id,
      pointer: `/corrections/${index}/measurement`,
    })),
  };
}

function idOf({ measurement }: Wanted["corrections"][number]): string {
  const { id } = measurement;
  return typeof id === "string" ? id : JSON.stringify(id ?? null);
}

/** Names every id that isn't there, and every one that stands twice. */
function refuseUnknown(corrections: Wanted["corrections"], there: Map<string, Measurement>): void {
  const first = new Map<string, number>();
  const problems = corrections.flatMap((correction, index): Problem[] => {
    const id = idOf(correction);
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
