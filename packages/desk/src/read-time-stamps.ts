import * as z from "zod";
import { missingTimeStamps, readTimeStamps as readStored } from "@weighhouse/store/time-stamps";
import type { MissingTimeStamp } from "@weighhouse/store/time-stamps";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

export const readTimeStampsInput = z.strictObject({ key: z.string() });

export type TimeStamps = {
  /** `token` is the DER of the authority's answer, base64; its head is the signed one of that size. */
  stamped: { size: number; at: string; authority: string; token: string }[];
  /** Heads that should have one and don't yet: also all of them where no authority is set. */
  missing: Omit<MissingTimeStamp, "campaign">[];
};

/** Which heads of a ledger are time-stamped, and which should be. */
export async function readTimeStamps(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readTimeStampsInput>,
): Promise<TimeStamps> {
  const { key } = parseInput(readTimeStampsInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const stored = await readStored(desk.store, { campaign: key, size: campaign.size });
  const missing = await missingTimeStamps(desk.store, key);
  return {
    stamped: stored.map(({ size, at, authority, token }) => ({
      size,
      at,
      authority,
      token: Buffer.from(token).toString("base64"),
    })),
    missing: missing.map(({ size, because }) => ({ size, because })),
  };
}
