import type { DraftTable, RawTable } from "./raw-table";

/** Reads a file of any format, told by its content; the name is a hint only. */
export declare function readTable(name: string, bytes: Uint8Array): RawTable | DraftTable;
