import type { Candidate } from "@weighhouse/campaign/candidates";
import type { Predictive } from "./predictive";

/** A candidate as it was weighed: what the sets go on from. */
export interface Weighed {
  candidate: Candidate;
  gain: number;
  /** Of a reading with a value: each hypothesis's predictive. */
  predictives: Map<string, Predictive> | null;
  /** Of an event's report or a count: the probability of each outcome. */
  outcomes: Map<string, number[]> | null;
}

/** Today's hypotheses with a chance, in rank order. */
export interface Today {
  posteriors: Map<string, number>;
  /** The two that lead; null with fewer. */
  top: { first: string; second: string; log10B: number } | null;
}
