import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import type { Order } from "@weighhouse/campaign/standings";
import { enter, requireOwnTeam } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { refuseTaken } from "./declared-parts";
import { parseInput } from "./parse-input";
import { ordersOf } from "./prediction-orders";
import { recordEntries } from "./record-entries";

export const registerHypothesisInput = z.strictObject({
  key: z.string(),
  /** `team` may be left out: the actor's own. */
  hypothesis: payloadSchemas["hypothesis.registered"],
});
export type RegisterHypothesisInput = z.input<typeof registerHypothesisInput>;

export type Registered = Appended & {
  registeredAt: string;
  /** Each prediction's order, as the standings have it from now on. */
  orders: { measurand: string; order: Order }[];
};

/**
 * Puts a team's hypothesis on the record. After registration's close, or after data, it is still
 * taken: its predictions are marked as filed after data and leave the standings alone.
 */
export async function registerHypothesis(
  desk: Desk,
  actor: Actor,
  input: RegisterHypothesisInput,
): Promise<Registered> {
  const { key, hypothesis } = parseInput(registerHypothesisInput, input);
  const access = await enter(desk, actor, key, "register-hypothesis");
  const payload = { ...hypothesis, team: hypothesis.team ?? access.team };
  requireOwnTeam(access, "register-hypothesis", payload.team);
  const field = { list: "hypotheses", key: payload.key, pointer: "/hypothesis" } as const;
  const stored = await recordEntries(desk, access, ({ document }) => {
    refuseTaken(document, field);
    return { entries: [{ kind: "hypothesis.registered", payload }], fields: [field] };
  });
  return {
    ...appended(key, stored),
    registeredAt: stored.at[0]!,
    orders: await ordersOf(desk, actor, { key, hypothesis: payload.key, size: stored.to }),
  };
}
