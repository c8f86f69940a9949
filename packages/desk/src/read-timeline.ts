import * as z from "zod";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { readTimeline as readSteps } from "@weighhouse/store/standings";
import type { TimelineStep } from "@weighhouse/store/standings";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

export const readTimelineInput = z.strictObject({
  key: z.string(),
  /** Up to this many entries; all where it is absent. */
  size: z.int().min(1).optional(),
});

/** ln evidence of each hypothesis after each transaction that moved it, and what moved it. */
export async function readTimeline(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readTimelineInput>,
): Promise<TimelineStep[]> {
  const { key, size } = parseInput(readTimelineInput, input);
  await enter(desk, actor, key, "read-campaign");
  return readSteps(desk.store, { campaign: key, engine: ENGINE_VERSION, size });
}
