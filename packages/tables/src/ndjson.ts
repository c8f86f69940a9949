import type { DraftRow } from "./raw-table";

/** One line of NDJSON as a draft; null for a blank one. A pure function, for streams of any length. */
export declare function readDraftLine(text: string, line: number): DraftRow | null;
