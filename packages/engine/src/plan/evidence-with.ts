import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import { copySums } from "../copy-sums";
import { EngineError } from "../engine-error";
import type { EngineState } from "../engine-state";
import { lnEvidenceOf } from "../hypothesis-scores";
import { openWorkspace } from "../open-workspace";
import { readCounted } from "../read-counted";
import type { Reading } from "../readings";
import { createState } from "../state";
import { addReading } from "../sums";
import { takeUnmovedBlocks } from "../unmoved-blocks";
import type { Workspace } from "../workspace";

/**
 * ln of a hypothesis's evidence of a campaign with further measurements over that without; null where
 * either is impossible.
 *
 * @throws {Unscorable}
 */
export type EvidenceRatio = (extra: readonly Measurement[], hypothesis: string) => number | null;

/** What can't be scored with a further reading, as the engine's own problems. */
export class Unscorable extends Error {
  readonly problems: readonly Problem[];

  constructor(problems: readonly Problem[]) {
    super("a campaign with a further reading can't be scored");
    this.name = "Unscorable";
    this.problems = problems;
  }
}

/**
 * Only the hypothesis that is asked for is scored, and of it only what a further reading touches.
 *
 * @throws {Unscorable} at once where the campaign itself can't be scored
 */
export function evidenceRatio(document: CampaignDocument): EvidenceRatio {
  const made = createState(document);
  if (!made.ok) throw new Unscorable(made.problems);
  const state = made.value;
  const base = openWorkspace(state);
  const context = { dates: state.tally.dates, includeAfter: false };
  const lnOf = (workspace: Workspace, key: string): number => {
    const said = state.frame.hypotheses.find((one) => one.key === key) ?? null;
    try {
      return lnEvidenceOf(workspace, said, context);
    } catch (error) {
      if (error instanceof EngineError) throw new Unscorable(error.problems);
      throw error;
    }
  };
  return (extra, key) => {
    const before = lnOf(base, key);
    const after = lnOf(withReadings(state, base, readingsOf(state, extra)), key);
    return Number.isFinite(before) && Number.isFinite(after) ? after - before : null;
  };
}

function readingsOf({ frame, tally }: EngineState, extra: readonly Measurement[]): Reading[] {
  return extra.flatMap((measurement, i) => {
    const read = readCounted(frame, measurement, tally.size + i);
    if (!read.ok) throw new Unscorable(read.problems);
    return read.value ?? [];
  });
}

function withReadings(
  { frame, sums }: EngineState,
  base: Workspace,
  readings: readonly Reading[],
): Workspace {
  const touched = new Set(readings.map(({ measurand }) => measurand));
  const longer = copySums(sums, touched);
  for (const reading of readings) addReading(longer, reading, frame);
  const workspace = openWorkspace({ frame, sums: longer });
  takeUnmovedBlocks(workspace, base, touched);
  return workspace;
}
