import type { CampaignDocument } from "@weighhouse/campaign/document";
import { documentFromParts } from "@weighhouse/campaign/fold";
import { documentParts, partNames } from "@weighhouse/campaign/parts";
import type { Part, PartContent, PartName } from "@weighhouse/campaign/parts";
import { and, asc, eq, gt, inArray, isNull, lte, or } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { CampaignRow } from "./campaigns";
import type { Store } from "./open-store";
import { readEntry } from "./read-ledger";
import { measurements, parts } from "./schema/tables";
import { StoreError } from "./store-error";
import { rootAt } from "./tree-root";

export type DocumentAsOf = {
  document: CampaignDocument;
  size: number;
  latestSize: number;
  /** Root of the tree of that size, base64. */
  treeHead: string;
  /** `at` of the last entry before that size. */
  at: string;
};

/**
 * The campaign document as of a size (entries [0, size)); the latest unless given. Any size: also
 * one in the middle of a transaction, which no signed head has.
 *
 * @throws {StoreError} `no-such-campaign`, `no-such-size`
 */
export async function readDocument(
  store: Store,
  campaign: string,
  size?: number,
): Promise<DocumentAsOf> {
  const found = await findCampaign(store, campaign);
  const asOf = size ?? found.size;
  if (!Number.isInteger(asOf) || asOf < 1 || asOf > found.size) {
    throw new StoreError(
      "no-such-size",
      `found the size ${asOf}; allowed are 1 to ${found.size}, the ledger's entries`,
    );
  }
  const [documentParts, treeHead, at] = await Promise.all([
    readParts(store, found, asOf),
    rootAt(store, campaign, asOf),
    asOf === found.size
      ? found.lastAt
      : readEntry(store, { campaign, seq: asOf - 1 }).then(({ entry }) => entry.at),
  ]);
  const document = documentFromParts(documentParts);
  return { document, size: asOf, latestSize: found.size, treeHead, at };
}

/**
 * The newest document without its measurements, for who judges new ones: their number is no cost.
 * The dates of measurands are there, since the fold keeps them with the measurands.
 */
export async function readDeclarations(
  store: Store,
  campaign: string,
): Promise<{ document: CampaignDocument; size: number }> {
  const found = await findCampaign(store, campaign);
  const declared = await readDeclared(store, found, found.size);
  const parts = declared.filter(({ part }) => part !== "correlation");
  return { document: documentFromParts(parts), size: found.size };
}

/** Everything that the newest entries left: also what stands beside the document. */
export async function readEverything(
  store: Store,
  campaign: string,
): Promise<{ parts: Part[]; size: number; at: string }> {
  const found = await findCampaign(store, campaign);
  const read = await Promise.all([
    readDeclared(store, found, found.size, partNames),
    readPosted(store, found, found.size),
  ]);
  return { parts: read.flat(), size: found.size, at: found.lastAt };
}

/** Parts of one kind as of a size, in the order of their first put; never measurements. */
export async function readPartsOf(
  store: Store,
  { campaign, part, size }: { campaign: string; part: PartName; size?: number | undefined },
): Promise<Part[]> {
  const found = await findCampaign(store, campaign);
  return readDeclared(store, found, size ?? found.size, [part]);
}

/** Versions that hold at a size never change again, so this needs no lock and no snapshot. */
async function readParts(store: Store, campaign: CampaignRow, size: number): Promise<Part[]> {
  const read = await Promise.all([
    readDeclared(store, campaign, size),
    readPosted(store, campaign, size),
  ]);
  return read.flat();
}

async function readDeclared(
  store: Store,
  { id }: CampaignRow,
  size: number,
  wanted: readonly PartName[] = documentParts,
): Promise<Part[]> {
  const rows = await store.readDb
    .select({ part: parts.part, key: parts.key, content: parts.content })
    .from(parts)
    .where(and(eq(parts.campaignId, id), inArray(parts.part, [...wanted]), holdsAt(parts, size)))
    .orderBy(asc(parts.firstSeq), asc(parts.firstPlace));
  return rows.map(({ part, key, content }) => partOf(part as PartName, key, content));
}

async function readPosted(store: Store, { id }: CampaignRow, size: number): Promise<Part[]> {
  const rows = await store.readDb
    .select({ key: measurements.id, content: measurements.content })
    .from(measurements)
    .where(and(eq(measurements.campaignId, id), holdsAt(measurements, size)))
    .orderBy(asc(measurements.firstSeq), asc(measurements.firstPlace));
  return rows.map(({ key, content }) => partOf("measurement", key, content));
}

function holdsAt(table: typeof parts | typeof measurements, size: number) {
  return and(lte(table.fromSize, size), or(isNull(table.toSize), gt(table.toSize, size)));
}

function partOf(part: PartName, key: string, content: string): Part {
  return { part, key, content: JSON.parse(content) as PartContent };
}
