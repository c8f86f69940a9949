import * as z from "zod";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import { measurementSealSchema } from "@weighhouse/campaign/seals";
import { enter } from "./access";
import { appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { authorOf, recordEntries } from "./record-entries";
import { checkOpened, sealHeld } from "./seal-content";
import type { SealedAppended } from "./seal-content";
import { timeAt } from "./time";

const { digest, measurand, until } = measurementSealSchema.shape;

export const sealMeasurementInput = z.strictObject({
  key: z.string(),
  until,
  seal: z.discriminatedUnion("keeping", [
    z.strictObject({ keeping: z.literal("held"), measurement: measurementContentSchema }),
    z.strictObject({ keeping: z.literal("kept"), digest, measurand }),
  ]),
});

/** Seals a measurement: that there is one of its measurand is public, what it says is not. */
export async function sealMeasurement(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof sealMeasurementInput>,
): Promise<SealedAppended> {
  const { key, until, seal } = parseInput(sealMeasurementInput, input);
  const access = await enter(desk, actor, key, "seal-measurement");
  const measurand = seal.keeping === "held" ? seal.measurement.measurand : seal.measurand;
  const bound = { team: access.team, hypothesis: null, measurand };
  const held = seal.keeping === "held" ? sealHeld(access, bound, seal.measurement) : null;
  const made = held?.digest ?? (seal.keeping === "kept" ? seal.digest : "");
  const payload = { digest: made, measurand, until, keeping: seal.keeping };
  const stored = await recordEntries(desk, access, ({ parts, size }) => {
    const entry = { kind: "measurement.sealed", payload } as const;
    if (held !== null) {
      const moment = { by: authorOf(access), at: timeAt(desk), size };
      const opened = { kind: "measurement.revealed", payload: held } as const;
      checkOpened(parts, [entry, opened], { ...moment, place: "/seal/measurement" });
    }
    const pointer = seal.keeping === "kept" ? "/seal" : "";
    return { entries: [entry], fields: [], pointer, holds: held };
  });
  return { ...appended(key, stored), digest: made };
}
