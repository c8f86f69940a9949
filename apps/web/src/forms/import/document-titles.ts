import { readCampaignText } from "@weighhouse/campaign/read";

/** Titles by key of a document's parts, as its reader knows them. */
export interface DocumentTitles {
  hypotheses: Map<string, string>;
  measurands: Map<string, string>;
}

/** Keys and titles of what a campaign document's text holds; none of one that can't be read. */
export function documentTitles(text: string): DocumentTitles {
  const read = readCampaignText(text);
  const titles = (parts: readonly { key: string; title: string | null }[]) =>
    new Map(parts.map(({ key, title }) => [key, title ?? key]));
  return {
    hypotheses: titles(read.ok ? read.value.hypotheses : []),
    measurands: titles(read.ok ? read.value.measurands : []),
  };
}
