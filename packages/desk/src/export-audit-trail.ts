import * as z from "zod";
import { writeArchive } from "@weighhouse/audit/write";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { readDocument } from "@weighhouse/store/read-document";
import { readHeads, readSigningKeys, streamEntries } from "@weighhouse/store/read-ledger";
import type { StoredHead } from "@weighhouse/store/read-ledger";
import { readTimeStamps } from "@weighhouse/store/time-stamps";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { readStandings } from "./read-standings";
import { onStore } from "./store-refusals";

export const exportAuditTrailInput = z.strictObject({
  key: z.string(),
  /** As of this many entries, at the end of a transaction; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

export type AuditTrail = {
  /** The file's name. */
  name: string;
  bytes: Uint8Array;
  size: number;
  /** Root of the tree of that size, base64. */
  treeHead: string;
};

/** The audit trail as one ZIP: the same bytes for the same ledger, engine and key. */
export async function exportAuditTrail(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof exportAuditTrailInput>,
): Promise<AuditTrail> {
  const { key, size: wanted } = parseInput(exportAuditTrailInput, input);
  const { campaign } = await enter(desk, actor, key, "export-audit-trail");
  const signer = desk.store.signer;
  if (!signer) throw new Error("a process without a signing key can't sign an audit trail");
  const size = wanted ?? campaign.size;
  const { document, treeHead } = await onStore(() => readDocument(desk.store, key, size));
  const { standings } = await readStandings(desk, actor, { key, size });
  const heads = await readHeads(desk.store, { campaign: key, size });
  requireSignedHead(heads, size);
  const bytes = writeArchive({
    ...(await wholeLedger(desk, key, size)),
    heads: heads.map(({ note }) => note),
    timeStamps: await readTimeStamps(desk.store, { campaign: key, size }),
    keys: await readSigningKeys(desk.store),
    document,
    standings,
    engine: ENGINE_VERSION,
    signer,
    hasher: nodeHasher,
  });
  return { name: auditTrailName(key, size), bytes, size, treeHead };
}

export function auditTrailName(key: string, size: number): string {
  return `${key}-audit-${size}.zip`;
}

async function wholeLedger(desk: Desk, campaign: string, size: number) {
  const entries = [];
  const payloads = [];
  for await (const { entry, payload } of streamEntries(desk.store, { campaign, size })) {
    entries.push(entry);
    payloads.push(payload);
  }
  return { entries, payloads };
}

/** The middle of a transaction was never signed, so nothing could be checked against it. */
function requireSignedHead(heads: StoredHead[], size: number): void {
  const last = heads.at(-1)?.size ?? 0;
  if (last === size) return;
  throw new DeskError(
    "not-found",
    `found no signed head of size ${size}; allowed are ends of transactions, as ${last} is`,
  );
}
