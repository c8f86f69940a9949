import type { Problem } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

/** What the scorer made of a size: standings, or why the document can't be scored. */
export type Scored = {
  size: number;
  engine: string;
  scoredAt: string;
} & ({ standings: Standings; problems: null } | { standings: null; problems: Problem[] });

export type TimelineStep = {
  /** Size at the end of the transaction. */
  size: number;
  at: string;
  /** What moved it: the transaction's first entry that changed measurements or hypotheses. */
  movedBy: { seq: number; kind: string; facilities: string[]; measurements: number };
  points: { hypothesis: string; lnEvidence: number | null }[];
};

export async function saveStandings(
  _store: Store,
  _input: { campaign: string; size: number; engine: string } & (
    { standings: Standings } | { problems: Problem[] }
  ),
): Promise<void> {
  throw new StoreError("no-such-campaign", "");
}

/** Standings of a size, or the latest scored; null: not scored yet by that engine. */
export async function readStandings(
  _store: Store,
  _input: { campaign: string; size: number | "latest"; engine: string },
): Promise<Scored | null> {
  throw new StoreError("no-such-campaign", "");
}

/** ln evidence over time, a step per transaction that changed measurements or hypotheses. */
export async function readTimeline(
  _store: Store,
  _input: { campaign: string; engine: string; size?: number },
): Promise<TimelineStep[]> {
  throw new StoreError("no-such-campaign", "");
}

export async function saveTimelineSteps(
  _store: Store,
  _input: { campaign: string; engine: string; steps: TimelineStep[] },
): Promise<void> {
  throw new StoreError("no-such-campaign", "");
}

export type ScorerState = { size: number; state: string };

export async function saveState(
  _store: Store,
  _input: { campaign: string; engine: string; stateVersion: string } & ScorerState,
): Promise<void> {
  throw new StoreError("no-such-campaign", "");
}

export async function readState(
  _store: Store,
  _input: { campaign: string; engine: string; stateVersion: string },
): Promise<ScorerState | null> {
  throw new StoreError("no-such-campaign", "");
}
