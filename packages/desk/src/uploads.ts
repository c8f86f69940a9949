import { createHash } from "node:crypto";
import { readDeclarations, readDocument } from "@weighhouse/store/read-document";
import { stagedTogether } from "@weighhouse/store/read-staged";
import {
  clearPart,
  clearUpload,
  findUpload,
  keepPart,
  openUpload as openInStore,
} from "@weighhouse/store/uploads";
import type { StagedPart, Upload } from "@weighhouse/store/uploads";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import { enter } from "./access";
import type { Access } from "./access";
import { RowRules } from "./apply-rules";
import type { Actor, Desk } from "./desk";
import { DeskError, invalid } from "./desk-error";
import { postUpload as postStaged } from "./post-upload";
import type { PostedRows, TellProgress } from "./posted-rows";
import { previewUpload as previewStaged } from "./preview-upload";
import type { PreviewedRow, PreviewedRows } from "./previewed-rows";
import type { Action } from "./roles";
import { inPart, withDefaults } from "./row-source";
import type { RowDefaults } from "./row-source";
import { linePieces } from "./stage-lines";
import type { Piece } from "./stage-lines";
import { stageRows } from "./stage-rows";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

/** Measurements that are sent in parts, so that a broken line can be gone on with. */
export type OpenUpload = { upload: string; expires: string; parts: StagedPart[] };

/** Parts are numbered from 1, and posted in that order. */
export const MOST_PARTS = 100_000;

export async function openUpload(
  desk: Desk,
  actor: Actor,
  { key }: { key: string },
): Promise<OpenUpload> {
  const { member } = await enterAsMember(desk, actor, key, "post-measurements");
  const opened = await onStore(() => openInStore(desk.store, { campaign: key, member }));
  return { upload: opened.upload, expires: opened.expiresAt, parts: [] };
}

type Named = { key: string; upload: string };

export async function readUpload(desk: Desk, actor: Actor, named: Named): Promise<OpenUpload> {
  const { upload, expiresAt, parts } = (await find(desk, actor, named, "post-measurements")).found;
  return { upload, expires: expiresAt, parts };
}

export async function deleteUpload(desk: Desk, actor: Actor, named: Named): Promise<void> {
  const { found } = await find(desk, actor, named, "post-measurements");
  await clearUpload(desk.store, found);
}

/**
 * Judges and stages one part of newline-delimited JSON. The same bytes again change nothing; others
 * take the part's place.
 *
 * @throws {DeskError} `invalid` where what is wrong is no row's; rows at fault are staged with their
 *   faults, which a preview or the posting tells
 */
export async function putPart(
  desk: Desk,
  actor: Actor,
  input: Named & { part: number; bytes: Uint8Array; defaults: RowDefaults },
): Promise<StagedPart> {
  const { part, bytes, defaults } = input;
  const { access, found } = await find(desk, actor, input, "post-measurements");
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const there = found.parts.find((one) => one.part === part);
  if (there?.sha256 === sha256) return there;
  await clearPart(desk.store, found, part);
  const { document } = await onStore(() => readDeclarations(desk.store, input.key));
  try {
    const staged = await stageRows(
      desk,
      { document, access },
      {
        to: { ...found, part },
        pieces: piecesOfBytes(bytes, defaults),
        columns: [],
        tell: () => {},
      },
    );
    if (staged.problems.length > 0) throw invalid(staged.problems);
    const kept = { part, sha256, rows: staged.rows, bytes: bytes.length };
    await keepPart(desk.store, found, kept);
    return kept;
  } catch (error) {
    if (isTaken(error)) {
      throw new DeskError("busy", `found part ${part} being sent already; allowed once at a time`);
    }
    await clearPart(desk.store, found, part);
    throw error;
  }
}

/** Enters all parts, or nothing; the upload is gone once it is entered. */
export async function postUpload(
  desk: Desk,
  actor: Actor,
  { tell = () => {}, ...named }: Named & { tell?: TellProgress },
): Promise<PostedRows> {
  const { access, found } = await find(desk, actor, named, "post-measurements");
  const { document } = await onStore(() => readDeclarations(desk.store, named.key));
  const posted = await postStaged(desk, access, {
    upload: found,
    together: () => wholeProblems(desk, document, found),
    place: inPart,
    bytes: bytesOf(found.parts),
    tell,
  });
  await clearUpload(desk.store, found);
  return posted;
}

/** What posting it would do. Enters nothing, and the upload stays. */
export async function previewUpload(
  desk: Desk,
  actor: Actor,
  input: Named & { row: (row: PreviewedRow) => void | Promise<void>; tell?: TellProgress },
): Promise<PreviewedRows> {
  const { row, tell = () => {}, ...named } = input;
  const { found } = await find(desk, actor, named, "preview-measurements");
  const { document } = await onStore(() => readDocument(desk.store, named.key));
  const preview = await previewStaged(desk, document, {
    upload: found,
    together: () => wholeProblems(desk, document, found),
    bytes: bytesOf(found.parts),
    row,
    tell,
  });
  return { ...preview, columns: [] };
}

/** No row at all, and what is wrong with rows of several parts taken together. */
async function wholeProblems(
  desk: Desk,
  document: CampaignDocument,
  found: Upload & { parts: StagedPart[] },
): Promise<Problem[]> {
  if (found.parts.every(({ rows }) => rows === 0)) {
    const allowed = "one measurement or more, in parts that were sent";
    return [{ pointer: "", code: "missing", found: "no row", allowed }];
  }
  if (found.parts.length < 2) return [];
  const some = await stagedTogether(desk.store.sql, found);
  return new RowRules({ document, at: timeAt(desk) }).together(some);
}

async function find(desk: Desk, actor: Actor, { key, upload }: Named, action: Action) {
  const access = await enterAsMember(desk, actor, key, action);
  const { member } = access;
  const found = await onStore(() => findUpload(desk.store, { campaign: key, upload, member }));
  return { access, found };
}

async function enterAsMember(
  desk: Desk,
  actor: Actor,
  key: string,
  action: Action,
): Promise<Access & { member: string }> {
  const access = await enter(desk, actor, key, action);
  const { member } = access;
  if (member === null) throw new DeskError("not-allowed", "found no membership");
  return { ...access, member };
}

async function* piecesOfBytes(bytes: Uint8Array, defaults: RowDefaults): AsyncGenerator<Piece> {
  const whole = {
    async *[Symbol.asyncIterator]() {
      yield bytes;
    },
  };
  for await (const piece of linePieces(whole)) {
    yield { rows: withDefaults(piece.rows, defaults), bytes: piece.bytes };
  }
}

function bytesOf(parts: StagedPart[]): number {
  return parts.reduce((sum, { bytes }) => sum + bytes, 0);
}

/** PostgreSQL's unique_violation: another request stages the same part. */
function isTaken(error: unknown): boolean {
  return (error as { code?: string } | null)?.code === "23505";
}
