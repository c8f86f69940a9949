import { readdirSync, readFileSync } from "node:fs";

/** Written by astropy, and what astropy reads back: test/reference/tables/make-tables.py. */
const folder = new URL("../../../../test/reference/tables/files/", import.meta.url);

export function tableFiles(ending: ".ecsv" | ".vot"): string[] {
  return readdirSync(folder).filter((name) => name.endsWith(ending));
}

export function bytesOf(name: string): Uint8Array<ArrayBuffer> {
  return new Uint8Array(readFileSync(new URL(name, folder)));
}

export function textOf(name: string): string {
  return readFileSync(new URL(name, folder), "utf8");
}

export type AstropyTable = {
  rows: number;
  columns: {
    name: string;
    unit: string | null;
    description: string | null;
    ucd?: string;
    time?: { scale: string; format: string };
    /** Arrays nest. */
    cells: unknown[];
  }[];
};

export function astropyReads(name: string): AstropyTable {
  return JSON.parse(textOf(`${name}.json`)) as AstropyTable;
}
