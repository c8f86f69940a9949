import "server-only";
import type { Problem } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { cache } from "react";
import { readFor, refusalOf } from "./reader";

/** The campaign as of a size (null: now), read once a request however many parts of a page ask. */
export const readCampaign = cache((key: string, size: number | null) =>
  readFor(`/campaigns/${key}`, (caller) => caller.campaigns.get({ key, ...sizeOf(size) })),
);

/** Standings as of a size, or why the document cannot be scored. */
export type StandingsView = { size: number; latestSize: number; state: "current" | "scoring" } & (
  { standings: Standings; problems: null } | { standings: null; problems: Problem[] }
);

export const readStandings = cache(
  async (key: string, size: number | null): Promise<StandingsView> => {
    // Asked first: who may not see the campaign is answered by that, and its size may be needed.
    const view = await readCampaign(key, size);
    try {
      const scored = await readFor(`/campaigns/${key}`, (caller) =>
        caller.standings.get({ key, ...sizeOf(size) }),
      );
      return { ...scored, problems: null };
    } catch (error) {
      const refusal = refusalOf(error);
      if (refusal?.code !== "invalid") throw error;
      const { size: at, latestSize } = view;
      return {
        size: at,
        latestSize,
        state: "current",
        standings: null,
        problems: refusal.problems,
      };
    }
  },
);

export const readTimeline = cache((key: string) =>
  readFor(`/campaigns/${key}`, (caller) => caller.standings.timeline({ key })),
);

export type CampaignView = Awaited<ReturnType<typeof readCampaign>>;

/** `?size=` of a page's address: a whole number from 1, else null, which means now. */
export function sizeFrom(search: { size?: string | string[] }): number | null {
  const text = Array.isArray(search.size) ? search.size[0] : search.size;
  return text !== undefined && /^[1-9]\d{0,14}$/.test(text) ? Number(text) : null;
}

function sizeOf(size: number | null): { size?: number } {
  return size === null ? {} : { size };
}
