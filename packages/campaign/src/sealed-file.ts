import * as z from "zod";
import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import { measurementContentSchema, predictionContentSchema } from "./entries";
import { key, optional, time } from "./fields";
import { readForm } from "./form";
import { parseJson } from "./json-text";
import type { Problem, Result } from "./problem";
import { nonce, sha256 } from "./seals";

/**
 * What a team gives to seal by itself: which campaign and ledger, for whom, until when, and one of a
 * prediction and a measurement.
 */
export const sealRequestSchema = z.strictObject({
  campaign: key,
  /** The ledger's id, as the campaign's ledger page says it. */
  ledger: z.string().min(1).max(200),
  team: optional(key),
  hypothesis: optional(key),
  until: time,
  prediction: optional(predictionContentSchema),
  measurement: optional(measurementContentSchema),
});
export type SealRequest = z.output<typeof sealRequestSchema>;

export const SEALED_FORMAT = "weighhouse-seal/1";

/** The file to keep: without it nobody opens the seal. */
export const sealedFileSchema = z.strictObject({
  format: z.literal(SEALED_FORMAT),
  campaign: key,
  ledger: z.string().min(1).max(200),
  team: optional(key),
  hypothesis: optional(key),
  measurand: key,
  until: time,
  digest: sha256,
  nonce,
  content: z.record(z.string(), z.unknown()),
});
export type SealedFile = z.output<typeof sealedFileSchema>;

/** Reads a request to seal from JSON text, or everything that is wrong with it. */
export function readSealRequest(text: string): Result<SealRequest> {
  const read = readText(sealRequestSchema, text);
  if (!read.ok) return read;
  const { prediction, measurement, hypothesis } = read.value;
  const problems: Problem[] = [];
  if ((prediction === null) === (measurement === null)) {
    const found = prediction === null ? "neither" : "both";
    problems.push(problem("", found, "one of prediction and measurement"));
  }
  if (prediction !== null && hypothesis === null) {
    problems.push(problem("/hypothesis", "nothing", "the key of the hypothesis that predicts it"));
  }
  if (measurement !== null && hypothesis !== null) {
    problems.push(problem("/hypothesis", hypothesis, "no hypothesis beside a measurement"));
  }
  return problems.length > 0 ? { ok: false, problems } : read;
}

/** Seals what is asked for. The nonce must be random and used once: 32 bytes, hexadecimal. */
export function sealFile(request: SealRequest, random: string): SealedFile {
  const { campaign, ledger, team, hypothesis, until } = request;
  const content = (request.prediction ?? request.measurement)!;
  const { measurand } = content;
  const bound = { ledger, team, hypothesis, measurand };
  const digest = sealDigest(nobleHasher, { ...bound, nonce: random, content });
  return { format: SEALED_FORMAT, campaign, ...bound, until, digest, nonce: random, content };
}

/** Reads a kept file from JSON text; one whose content isn't what its digest is of is refused. */
export function readSealedFile(text: string): Result<SealedFile> {
  const read = readText(sealedFileSchema, text);
  if (!read.ok) return read;
  const made = sealDigest(nobleHasher, read.value);
  if (made === read.value.digest) return read;
  const found = `a content and nonce of digest ${made}`;
  return {
    ok: false,
    problems: [problem("/content", found, `those of digest ${read.value.digest}`)],
  };
}

function readText<S extends z.ZodType>(schema: S, text: string): Result<z.output<S>> {
  const parsed = parseJson(text);
  if (parsed.problems.length > 0) return { ok: false, problems: parsed.problems };
  const { value, problems } = readForm(schema, parsed.value, "");
  return problems.length > 0 ? { ok: false, problems } : { ok: true, value: value as z.output<S> };
}

function problem(pointer: string, found: string, allowed: string): Problem {
  return { pointer, code: "contradiction", found, allowed };
}
