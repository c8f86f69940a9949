import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

const { key: measurand, ...closing } = payloadSchemas["measurand.closed"].shape;

export const closeMeasurandInput = z.strictObject({ key: z.string(), measurand, ...closing });

/**
 * Closes a measurand for a stated reason: the way out of a declaration that was a mistake. Its
 * measurements stay on record and are not counted.
 */
export async function closeMeasurand(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof closeMeasurandInput>,
): Promise<Appended> {
  const { key, measurand, ...closed } = parseInput(closeMeasurandInput, input);
  const access = await enter(desk, actor, key, "declare");
  const field = { list: "measurands", key: measurand, pointer: "/measurand" } as const;
  const stored = await recordEntries(desk, access, () => ({
    entries: [{ kind: "measurand.closed", payload: { key: measurand, ...closed } }],
    fields: [field],
    pointer: "",
  }));
  return appended(key, stored);
}
