import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { measurementOf } from "./declared-parts";
import { requireOwnMeasurements } from "./own-measurements";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

const action = "set-aside-measurement";

export const setAsideMeasurementInput = z.strictObject({
  key: z.string(),
  ...payloadSchemas["measurement.set-aside"].shape,
});

/** Keeps a measurement on record and counts it no more, for a stated reason. */
export async function setAsideMeasurement(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof setAsideMeasurementInput>,
): Promise<Appended> {
  const { key, ...payload } = parseInput(setAsideMeasurementInput, input);
  const access = await enter(desk, actor, key, action);
  const field = { list: "measurements", key: payload.id, pointer: "" } as const;
  const stored = await recordEntries(desk, access, async ({ document }) => {
    const measurement = measurementOf(document, payload.id);
    await requireOwnMeasurements(desk, access, { action, measurements: [measurement] });
    if (measurement.setAside) {
      const reason = measurement.setAside.reason;
      throw new DeskError("conflict", `found it set aside already: ${reason}`);
    }
    return { entries: [{ kind: "measurement.set-aside", payload }], fields: [field] };
  });
  return appended(key, stored);
}
