import * as z from "zod";
import { sha256 } from "@weighhouse/campaign/seals";

/** What the ledger's routes give, as it is described; a test reads their answers by these. */
const size = z.int().min(0);
const time = z.iso.datetime();
const proof = z.array(sha256).describe("Hashes from the leaf up, hexadecimal.");

const entry = z.strictObject({
  v: z.literal(1),
  campaign: z.string(),
  seq: size,
  at: time,
  by: z.union([
    z.strictObject({ member: z.string(), team: z.string().nullable() }),
    z.strictObject({ system: z.literal(true) }),
  ]),
  kind: z.string(),
  payloadSha256: sha256,
});

const payload = z.string().describe("The canonical text (RFC 8785) that payloadSha256 is of.");

export const ledgerLineSchema = z.strictObject({ entry, payload });

export const provedEntrySchema = z.strictObject({
  entry,
  payload,
  leafHash: sha256,
  head: z
    .strictObject({ size, root: z.base64(), note: z.string(), at: time })
    .describe("The newest signed head."),
  proof,
  keys: z
    .array(z.string())
    .describe("Public keys that signed heads here, as C2SP notes name them."),
});

export const consistencySchema = z.strictObject({ from: size, to: size, proof });

export const timeStampsSchema = z.strictObject({
  stamped: z.array(
    z.strictObject({
      size,
      at: time,
      authority: z.string(),
      token: z.base64().describe("DER of the authority's answer, base64."),
    }),
  ),
  missing: z.array(
    z.strictObject({ size, because: z.enum(["registration", "citation", "daily"]) }),
  ),
});

/** What a use-case that writes answers: the campaign, and the entries [from, to) that it made. */
export const appendedSchema = z.strictObject({
  key: z.string(),
  from: size,
  to: size,
  treeHead: z.string().describe("The root of the ledger after them."),
});
