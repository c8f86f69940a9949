import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import { measurementOf } from "./declared-parts";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { requireOwnMeasurements, requireTeamFor } from "./own-measurements";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";
import { differingFields } from "./same-content";

const action = "correct-measurement";

export const correctMeasurementInput = z.strictObject({
  key: z.string(),
  /** `team` may be left out: as it was. */
  ...payloadSchemas["measurement.corrected"].shape,
});

/** Gives a measurement new content for a stated reason. What it was before stays on record. */
export async function correctMeasurement(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof correctMeasurementInput>,
): Promise<Appended> {
  const { key, measurement, reason } = parseInput(correctMeasurementInput, input);
  const access = await enter(desk, actor, key, action);
  const field = { list: "measurements", key: measurement.id, pointer: "/measurement" } as const;
  const stored = await recordEntries(desk, access, async ({ document }) => {
    const before = measurementOf(document, measurement.id);
    const corrected = { ...measurement, team: measurement.team ?? before.team };
    await requireOwnMeasurements(desk, access, { action, measurements: [before] });
    requireTeamFor(access, action, corrected.team);
    if (differingFields(corrected, before, document).length === 0) {
      throw new DeskError("conflict", `found ${measurement.id} as it is; allowed another content`);
    }
    const payload = { measurement: corrected, reason };
    return { entries: [{ kind: "measurement.corrected", payload }], fields: [field], pointer: "" };
  });
  return appended(key, stored);
}
