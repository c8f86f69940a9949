import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

export const makeRemarkInput = z.strictObject({
  key: z.string(),
  ...payloadSchemas["remark.made"].shape,
});

/**
 * Puts a question, an objection or an answer beside another entry. Proposals of quantities and
 * objections to references are the coordinator's to answer.
 */
export async function makeRemark(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof makeRemarkInput>,
): Promise<Appended> {
  const { key, ...payload } = parseInput(makeRemarkInput, input);
  const access = await enter(desk, actor, key, "make-remark");
  const stored = await recordEntries(desk, access, ({ parts }) => {
    const asked = parts.some(
      (one) =>
        (one.part === "proposal" || one.part === "objection") && one.key === String(payload.on),
    );
    if (asked && payload.kind === "answer" && access.role !== "coordinator") {
      const found = `found an answer to entry ${payload.on} by a ${access.role}`;
      throw new DeskError("not-allowed", `${found}; allowed by the coordinator`);
    }
    return { entries: [{ kind: "remark.made", payload }], fields: [] };
  });
  return appended(key, stored);
}
