import * as z from "zod";
import { openingSchema } from "@weighhouse/campaign/seals";
import type { Part } from "@weighhouse/campaign/parts";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import type { NewEntry } from "./document-after";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";
import type { Decision } from "./record-entries";
import type { Opening } from "./seal-content";

export const openSealInput = z.strictObject({ key: z.string(), ...openingSchema.shape });

/** Opens a seal with what it was made of: a prediction then counts from when it was sealed. */
export async function openSeal(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof openSealInput>,
): Promise<Appended> {
  const { key, ...opening } = parseInput(openSealInput, input);
  const access = await enter(desk, actor, key, "open-seal");
  const stored = await recordEntries(desk, access, ({ parts }) => openingOf(parts, opening));
  return appended(key, stored);
}

/** The entry that opens a seal, of the kind that it is of. */
export function openingOf(parts: Part[], opening: Opening): Decision {
  const seal = parts.find(({ part, key }) => part === "seal" && key === opening.digest);
  if (seal === undefined) {
    throw new DeskError("not-found", `found no seal ${opening.digest} in the campaign`);
  }
  const { of, hypothesis } = seal.content as {
    of: "prediction" | "measurement";
    hypothesis: string;
  };
  const entry: NewEntry =
    of === "prediction"
      ? { kind: "prediction.revealed", payload: opening }
      : { kind: "measurement.revealed", payload: opening };
  const field =
    of === "prediction"
      ? ({ list: "hypotheses", key: hypothesis, pointer: "/content" } as const)
      : ({
          list: "measurements",
          key: String(opening.content["id"]),
          pointer: "/content",
        } as const);
  return { entries: [entry], fields: [field], pointer: "", releases: opening.digest };
}
