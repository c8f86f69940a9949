import { mkdir, readdir, readFile, rename, rm, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHead } from "@weighhouse/ledger/tree-head";
import { wrongUsage } from "./refusal";

/** A head that was seen, as signed, and what it says. */
export type WatchedHead = { note: string; head: TreeHead };

/** More heads than this aren't kept: the first and the newest stay. */
const MOST_KEPT = 50;

/**
 * Reads the heads that were kept, a file each (`<size>.note`, as `verify --head` takes it), smallest
 * first. None where the folder isn't there yet.
 */
export async function readWatchedHeads(folder: string): Promise<WatchedHead[]> {
  const heads: WatchedHead[] = [];
  for (const name of await noteFiles(folder)) {
    const file = join(folder, name);
    const note = await readFile(file, "utf8");
    try {
      heads.push({ note, head: parseTreeHead(note) });
    } catch {
      throw wrongUsage(`found no tree head in ${file}; allowed are heads that watch has kept`);
    }
  }
  return heads.toSorted((a, b) => a.head.size - b.head.size);
}

/** Keeps a head beside the others, whole or not at all. */
export async function keepWatchedHead(folder: string, { note, head }: WatchedHead): Promise<void> {
  try {
    await mkdir(folder, { recursive: true });
    const file = join(folder, `${String(head.size).padStart(16, "0")}.note`);
    await writeFile(`${file}.${process.pid}.part`, note);
    await rename(`${file}.${process.pid}.part`, file);
  } catch (error) {
    const why = (error as NodeJS.ErrnoException).code ?? String(error);
    throw wrongUsage(`found no way to write into ${folder} (${why}); allowed a folder for heads`);
  }
  const names = await noteFiles(folder);
  for (const name of names.slice(1, Math.max(1, names.length - MOST_KEPT + 1))) {
    await rm(join(folder, name), { force: true });
  }
}

/** Puts the heads aside that a restore took away: they stay in the folder, and are compared no more. */
export async function giveUpWatchedHeads(folder: string, after: number): Promise<void> {
  for (const name of await noteFiles(folder)) {
    const lost = Number.parseInt(name, 10) > after;
    if (lost) await rename(join(folder, name), join(folder, `${name}.lost`));
  }
}

async function noteFiles(folder: string): Promise<string[]> {
  try {
    return (await readdir(folder)).filter((name) => /^\d{16}\.note$/.test(name)).sort();
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return [];
    throw error;
  }
}
