import type { Standings } from "@weighhouse/campaign/standings";

export interface ScoreOptions {
  /** Predictions filed after data count as the others do. */
  includeAfter?: boolean;
  /** Where in the ledger the document was folded; null for a file. */
  asOf?: Standings["asOf"];
}
