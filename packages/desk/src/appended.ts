import type { Appended as Stored } from "@weighhouse/store/append";

/** What a use-case that writes answers: the campaign, and the entries [from, to) that it made. */
export type Appended = { key: string; from: number; to: number; treeHead: string };

export function appended(key: string, { from, to, treeHead }: Stored): Appended {
  return { key, from, to, treeHead };
}
