import { readFile, stat } from "node:fs/promises";
import { buffer } from "node:stream/consumers";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { problemLine, type Problem } from "@weighhouse/campaign/problem";
import { readCampaignPieces, readCampaignText } from "@weighhouse/campaign/read";
import { Refusal, wrongUsage } from "./refusal";
import { harmless } from "./terminal";
import { textPieces } from "./text-pieces";

/**
 * Reads and validates a campaign document from a file, or from stdin for `-`.
 *
 * @throws {Refusal} 2 where there is no such file, 1 with every error of the document
 */
export async function readDocumentFile(path: string): Promise<CampaignDocument> {
  const read =
    (await readInPieces(path)) ??
    readCampaignText(decode(path === "-" ? await readStdin() : await readBytes(path)));
  if (!read.ok) throw invalid(read.problems);
  return read.value;
}

/**
 * A large file is read in pieces, so that its text is never there as a whole. Null where that can't be: then
 * it is read as a whole, which says what is wrong with it.
 */
async function readInPieces(path: string): Promise<ReturnType<typeof readCampaignPieces>> {
  try {
    // What comes through a pipe can't be read a second time.
    if (path === "-" || !(await stat(path)).isFile()) return null;
    return readCampaignPieces(textPieces(path));
  } catch (error) {
    // No such file, or bytes that are no text.
    if ((error as NodeJS.ErrnoException).code !== undefined) return null;
    throw error;
  }
}

/** A file's text. @throws {Refusal} 2 where it can't be read, 1 where it is not UTF-8 */
export async function readTextFile(path: string): Promise<string> {
  return decode(await readBytes(path));
}

/** @throws {Refusal} 2 where the file can't be read */
export async function readBytes(path: string): Promise<Uint8Array> {
  try {
    return await readFile(path);
  } catch (error) {
    const why = (error as NodeJS.ErrnoException).code ?? String(error);
    throw wrongUsage(`found no readable file ${path} (${why}); allowed the path of a file`);
  }
}

/** Every problem on a line of its own. */
export function invalid(problems: readonly Problem[]): Refusal {
  return new Refusal(
    1,
    problems.map((problem) => harmless(problemLine(problem))),
  );
}

async function readStdin(): Promise<Uint8Array> {
  if (process.stdin.isTTY) process.stderr.write("Reading a campaign document from stdin\n");
  return buffer(process.stdin);
}

export function decode(bytes: Uint8Array): string {
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw new Refusal(1, [
      "(document): found bytes that are not UTF-8; allowed JSON text in UTF-8",
    ]);
  }
}
