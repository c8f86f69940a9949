import * as z from "zod";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { isPast, timeAt } from "./time";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

export const closeRegistrationInput = z.strictObject({ key: z.string() });

/** Closes registration now: what is filed from here on is marked as filed after data. */
export async function closeRegistration(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof closeRegistrationInput>,
): Promise<Appended> {
  const { key } = parseInput(closeRegistrationInput, input);
  const access = await enter(desk, actor, key, "close-registration");
  const stored = await recordEntries(desk, access, ({ document }) => {
    const closes = document.campaign.registrationCloses;
    if (isPast(closes, timeAt(desk))) {
      throw new DeskError("closed", `found registration closed since ${closes}; it closes once`);
    }
    return {
      entries: [{ kind: "registration.closed", payload: { by: "coordinator" } }],
      fields: [],
    };
  });
  return appended(key, stored);
}
