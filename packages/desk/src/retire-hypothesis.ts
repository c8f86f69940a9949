import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter, requireOwnTeam } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import { hypothesisOf } from "./declared-parts";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

const { key: hypothesis, reason } = payloadSchemas["hypothesis.retired"].shape;

export const retireHypothesisInput = z.strictObject({ key: z.string(), hypothesis, reason });

/**
 * Says that its team stands behind a hypothesis no more. It stays, with its standing and all that
 * it predicted: what it said before data is judged by what is measured, then as now.
 */
export async function retireHypothesis(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof retireHypothesisInput>,
): Promise<Appended> {
  const { key, hypothesis, reason } = parseInput(retireHypothesisInput, input);
  const access = await enter(desk, actor, key, "retire-hypothesis");
  const payload = { key: hypothesis, reason };
  const field = { list: "hypotheses", key: hypothesis, pointer: "/hypothesis" } as const;
  const stored = await recordEntries(desk, access, ({ document }) => {
    requireOwnTeam(access, "retire-hypothesis", hypothesisOf(document, hypothesis).team);
    return { entries: [{ kind: "hypothesis.retired", payload }], fields: [field], pointer: "" };
  });
  return appended(key, stored);
}
