import * as z from "zod";
import { key, time } from "./fields";

/**
 * Seals as payloads. A seal's content is kept as it was sealed, word by word, since its digest is
 * over that: what it says is read by the schema of what it holds.
 */
export const sha256 = z
  .string()
  .regex(/^[0-9a-f]{64}$/)
  .describe("a SHA-256: 64 of 0-9 and a-f");
export const nonce = z
  .string()
  .regex(/^[0-9a-f]{64}$/)
  .describe("32 random bytes: 64 of 0-9 and a-f");

/** `held`: the server keeps the content, encrypted, and opens it by itself; `kept`: the team does. */
export const keepings = ["held", "kept"] as const;
export type Keeping = (typeof keepings)[number];

const sealFields = { digest: sha256, measurand: key, until: time, keeping: z.enum(keepings) };

export const predictionSealSchema = z.strictObject({ ...sealFields, hypothesis: key });
export const measurementSealSchema = z.strictObject(sealFields);

/** Opens the seal of that digest. */
export const openingSchema = z.strictObject({
  digest: sha256,
  nonce,
  content: z.record(z.string(), z.unknown()),
});
