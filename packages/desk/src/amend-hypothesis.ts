import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter, requireOwnTeam } from "./access";
import { appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { hypothesisOf } from "./declared-parts";
import { parseInput } from "./parse-input";
import { ordersOf } from "./prediction-orders";
import { recordEntries } from "./record-entries";
import type { Registered } from "./register-hypothesis";

export const amendHypothesisInput = z.strictObject({
  key: z.string(),
  /** The whole hypothesis in its new version. */
  hypothesis: payloadSchemas["hypothesis.amended"],
});

/** Files a new version of a hypothesis; the predictions that it changes take its time. */
export async function amendHypothesis(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof amendHypothesisInput>,
): Promise<Registered> {
  const { key, hypothesis } = parseInput(amendHypothesisInput, input);
  const access = await enter(desk, actor, key, "amend-hypothesis");
  const field = { list: "hypotheses", key: hypothesis.key, pointer: "/hypothesis" } as const;
  const stored = await recordEntries(desk, access, ({ document }) => {
    const before = hypothesisOf(document, hypothesis.key);
    requireOwnTeam(access, "amend-hypothesis", before.team);
    // A hypothesis stays its team's: what another team takes up is a hypothesis of its own.
    const payload = { ...hypothesis, team: hypothesis.team ?? before.team };
    requireOwnTeam(access, "amend-hypothesis", payload.team);
    return { entries: [{ kind: "hypothesis.amended", payload }], fields: [field] };
  });
  return {
    ...appended(key, stored),
    registeredAt: stored.at[0]!,
    orders: await ordersOf(desk, actor, { key, hypothesis: hypothesis.key, size: stored.to }),
  };
}
