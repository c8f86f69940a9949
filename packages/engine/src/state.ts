import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import type { ScoreOptions } from "./score";

/** What the engine keeps between measurements; its fields are the engine's own. */
export interface EngineState {
  readonly version: number;
}

/** The state of a campaign with all measurements of its document in it. */
export function createState(_document: CampaignDocument): Result<EngineState> {
  throw new Error("being built");
}

/**
 * Takes further measurements in, O(k^2) each. The state given is used up: go on with the one returned.
 * When a measurement is refused nothing has changed, and the state given is still good.
 * Anything but new measurements (a set-aside, a new hypothesis, ...) needs `createState` again.
 * Problems' pointers count on from the measurements already in: `/measurements/{size + i}`.
 */
export function addMeasurements(
  _state: EngineState,
  _measurements: Measurement[],
): Result<EngineState> {
  throw new Error("being built");
}

/** The standings document of a state. */
export function standingsOf(_state: EngineState, _options: ScoreOptions = {}): Standings {
  throw new Error("being built");
}

/** JSON text; `restoreState` reads it back to the same numbers, bit for bit. */
export function serialiseState(_state: EngineState): string {
  throw new Error("being built");
}

/** Null when the text was written by another engine or state version. */
export function restoreState(_text: string): EngineState | null {
  throw new Error("being built");
}
