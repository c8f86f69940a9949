import type { Entry } from "@weighhouse/ledger/entry";
import type { Appended, Clock } from "./append";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

export type PostMeasurementsInput = {
  campaign: string;
  by: Entry["by"];
  /** As in the payload of `measurements.posted`; an `id` may be absent. */
  measurements: Record<string, unknown>[];
  correlations?: { a: string; b: string; coefficient: number }[];
  clock?: Clock | undefined;
};

export type Conflict = { id: string; field: string; there: unknown; posted: unknown };

export type Posted = {
  posted: string[];
  alreadyThere: string[];
  /** If there is any, nothing was posted. */
  conflicts: Conflict[];
  appended: Appended | null;
};

/** Posts measurements idempotently: what is already there with the same content changes nothing. */
export async function postMeasurements(
  _store: Store,
  _input: PostMeasurementsInput,
): Promise<Posted> {
  throw new StoreError("no-signer", "");
}

/** The id of a measurement that was posted without one: `<facility>:<observedAt>:<12 hex digits>`. */
export function defaultMeasurementId(_measurement: Record<string, unknown>): string {
  throw new StoreError("no-signer", "");
}
