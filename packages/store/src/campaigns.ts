import type { Store } from "./open-store";
import { StoreError } from "./store-error";

export type Visibility = "public" | "members";

export type CampaignRow = {
  id: number;
  key: string;
  ledger: string;
  clock: "real" | "simulated";
  visibility: Visibility;
  size: number;
  lastAt: string;
};

export type CampaignSummary = {
  key: string;
  title: string;
  visibility: Visibility;
  clock: "real" | "simulated";
  size: number;
  teams: number;
  hypotheses: number;
  measurements: number;
  registrationCloses: string | null;
  lastMeasurementAt: string | null;
  /** From the latest standings of that engine; null where nothing is scored or nobody leads. */
  leader: {
    hypothesis: string;
    title: string;
    posterior: number | null;
    /** log10 Bayes factor against rank 2; null without one. */
    log10Lead: number | null;
    runnerUp: string | null;
    size: number;
  } | null;
};

/** The campaign's row and tip; `no-such-campaign` if there is none. */
export async function findCampaign(_store: Store, key: string): Promise<CampaignRow> {
  throw new StoreError("no-such-campaign", key);
}

/** Campaigns that the user may see: public ones and those he is a member of (null: public ones). */
export async function listCampaigns(
  _store: Store,
  _input: { userId: string | null; engine: string },
): Promise<CampaignSummary[]> {
  return [];
}
