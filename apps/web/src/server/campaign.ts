import "server-only";
import { cache } from "react";
import { readFor } from "./reader";

/** The campaign as of a size (null: now), read once a request however many parts of a page ask. */
export const readCampaign = cache(async (key: string, size: number | null) =>
  readFor(`/campaigns/${key}`, (caller) => caller.campaigns.get({ key, ...sizeOf(size) })),
);

export const readStandings = cache(async (key: string, size: number | null) =>
  readFor(`/campaigns/${key}`, (caller) => caller.standings.get({ key, ...sizeOf(size) })),
);

export const readTimeline = cache(async (key: string) =>
  readFor(`/campaigns/${key}`, (caller) => caller.standings.timeline({ key })),
);

export type CampaignView = Awaited<ReturnType<typeof readCampaign>>;
export type StandingsView = Awaited<ReturnType<typeof readStandings>>;
export type TimelineView = Awaited<ReturnType<typeof readTimeline>>;

/** `?size=` of a page's address: a whole number from 1, else null, which means now. */
export function sizeFrom(search: { size?: string | string[] }): number | null {
  const text = Array.isArray(search.size) ? search.size[0] : search.size;
  return text !== undefined && /^[1-9]\d{0,14}$/.test(text) ? Number(text) : null;
}

function sizeOf(size: number | null): { size?: number } {
  return size === null ? {} : { size };
}
