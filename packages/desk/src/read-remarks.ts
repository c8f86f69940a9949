import * as z from "zod";
import type { MeasurandContent, Payload } from "@weighhouse/campaign/entries";
import type { Part } from "@weighhouse/campaign/parts";
import { readPartsOf } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const readRemarksInput = z.strictObject({
  key: z.string(),
  /** As of this many entries; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

type Filed = { seq: number; at: string; team: string | null };

export type Remark = Filed & Payload<"remark.made">;
/** `answer`: the coordinator's, the last where there are several; `declared`: the quantity is there. */
export type Proposal = Filed & {
  measurand: MeasurandContent;
  reason: string;
  state: "open" | "declared" | "answered";
  answer: Remark | null;
};
export type ReferenceObjection = Filed & {
  measurand: string;
  reason: string;
  answer: Remark | null;
};

export type Remarks = {
  remarks: Remark[];
  proposals: Proposal[];
  objections: ReferenceObjection[];
};

/** What is said beside the declarations: remarks on entries, proposals, objections to references. */
export async function readRemarks(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readRemarksInput>,
): Promise<Remarks> {
  const { key, size } = parseInput(readRemarksInput, input);
  await enter(desk, actor, key, "read-campaign");
  const read = (part: Part["part"]) =>
    onStore(() => readPartsOf(desk.store, { campaign: key, part, size }));
  const [said, proposed, objected, measurands] = await Promise.all([
    read("remark"),
    read("proposal"),
    read("objection"),
    read("measurand"),
  ]);
  const remarks = said.map(({ content }) => content as Remark);
  const answerTo = (seq: number) =>
    remarks.findLast(({ on, kind }) => on === seq && kind === "answer") ?? null;
  const declared = new Set(measurands.map((one) => one.key));
  return {
    remarks,
    proposals: proposed.map(({ content }) => {
      const proposal = content as Omit<Proposal, "state" | "answer">;
      const answer = answerTo(proposal.seq);
      const state = declared.has(proposal.measurand.key) ? "declared" : answer && "answered";
      return { ...proposal, answer, state: state ?? "open" };
    }),
    objections: objected.map(({ content }) => {
      const objection = content as Omit<ReferenceObjection, "answer">;
      return { ...objection, answer: answerTo(objection.seq) };
    }),
  };
}
