import * as z from "zod";
import * as layout from "@weighhouse/audit/layout";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { decodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import { readDocument } from "@weighhouse/store/read-document";
import { readHeads, readSigningKeys } from "@weighhouse/store/read-ledger";
import type { StoredHead } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { auditTrailName } from "./export-audit-trail";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const summariseAuditTrailInput = z.strictObject({ key: z.string() });

/** What the archive will hold, before it is made. */
export type AuditTrailSummary = {
  /** The file's name. */
  name: string;
  /** Number of entries. */
  size: number;
  engine: string;
  clock: "real" | "simulated";
  hypotheses: number;
  measurements: number;
  /** Number of signed heads. */
  heads: number;
  /** The newest signed head: whoever keeps its note can prove that nothing before was changed. */
  head: StoredHead;
  keys: { verifierKey: string; fingerprint: string }[];
  /**
   * Paths in the archive, but for the heads and keys, which are as many as said above, and the
   * quantities' figures; of a large campaign the sensitivity is left out, which the archive says.
   */
  files: string[];
};

/** What an audit trail made now will hold. */
export async function summariseAuditTrail(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof summariseAuditTrailInput>,
): Promise<AuditTrailSummary> {
  const { key } = parseInput(summariseAuditTrailInput, input);
  const { campaign } = await enter(desk, actor, key, "export-audit-trail");
  const { size, clock } = campaign;
  const [{ document }, heads, keys] = await Promise.all([
    onStore(() => readDocument(desk.store, key, size)),
    readHeads(desk.store, { campaign: key, size }),
    readSigningKeys(desk.store),
  ]);
  return {
    name: auditTrailName(key, size),
    size,
    engine: ENGINE_VERSION,
    clock,
    hypotheses: document.hypotheses.length,
    measurements: document.measurements.length,
    heads: heads.length,
    head: heads.at(-1)!,
    keys: keys.map((verifierKey) => ({
      verifierKey,
      fingerprint: fingerprint(decodeVerifierKey(verifierKey).publicKey),
    })),
    files: [
      layout.README,
      layout.MANIFEST,
      layout.MANIFEST_NOTE,
      layout.LEDGER,
      layout.PAYLOADS,
      layout.DOCUMENT,
      layout.STANDINGS,
      layout.SENSITIVITY,
      layout.CRATE,
      layout.METHODS,
      layout.CHECK_PROGRAM,
      ...layout.TABLE_NAMES.map(layout.tablePath),
      ...layout.TEX_NAMES.map(layout.texPath),
      ...layout.FIGURE_NAMES.map(layout.figurePath),
    ],
  };
}
