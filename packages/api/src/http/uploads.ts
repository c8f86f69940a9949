import { createHash } from "node:crypto";
import * as z from "zod";
import { sha256 } from "@weighhouse/campaign/seals";
import { MOST_PARTS } from "@weighhouse/desk/uploads";
import * as desk from "@weighhouse/desk/uploads";
import { ApiError } from "./api-error";
import { linesAnswer, someOf } from "./lines-answer";
import { postedLineSchema, postedSchema, previewLineSchema } from "./measurement-answers";
import { postedAnswer, rowWriter, whichRows } from "./measurements";
import { created, respondJson } from "./respond";
import { route } from "./route";
import { present, rowDefaultsSchema, sentMeasurementSchema } from "./row-body";

const group = "Measurements";
const scope = "measurements:post";
const LINES = "application/x-ndjson";
const PART_BYTES = 8 * 1024 * 1024;

const upload = z.uuid().describe("an upload's id");
const named = z.strictObject({ upload });

const partSchema = z.strictObject({
  part: z.int().min(1),
  sha256: sha256.describe("Of the part's bytes."),
  rows: z.int().min(0),
  bytes: z.int().min(0),
});

export const uploadSchema = z.strictObject({
  upload,
  expires: z.string().describe("When what was sent is thrown away."),
  parts: z.array(partSchema).describe("Those that are there as a whole."),
});

export const uploadRoutes = [
  route({
    method: "POST",
    path: "uploads",
    group,
    summary: "Begin an upload",
    says: "For measurements that are sent in parts, so that a broken line can be gone on with: what was sent waits for a day.",
    scope,
    once: true,
    gives: {
      status: 201,
      types: { "application/json": { schema: uploadSchema, says: "The upload, without parts." } },
    },
    async answer({ desk: at, actor, key }) {
      return created(await desk.openUpload(at, actor, { key }));
    },
  }),
  route({
    method: "GET",
    path: "uploads/{upload}",
    group,
    summary: "What is there of an upload",
    scope,
    parameters: named,
    gives: {
      status: 200,
      types: { "application/json": { schema: uploadSchema, says: "The upload and its parts." } },
    },
    async answer({ desk: at, actor, key, request, parameters }) {
      const read = await desk.readUpload(at, actor, { key, ...parameters });
      const tag = createHash("sha256").update(JSON.stringify(read)).digest("hex").slice(0, 16);
      return respondJson(request, read, `upload-${tag}`);
    },
  }),
  route({
    method: "PUT",
    path: "uploads/{upload}/parts/{part}",
    group,
    summary: "Send a part",
    says: "Lines of measurements, at most 8 MiB; parts are posted in the order of their numbers, from 1. The same bytes again change nothing, others take the part's place. A Content-Digest with sha-256 (RFC 9530) is checked.",
    scope,
    rate: "part",
    parameters: named.extend({
      part: z.int().min(1).max(MOST_PARTS).describe("its number, from 1"),
    }),
    query: rowDefaultsSchema,
    takes: {
      [LINES]: {
        schema: sentMeasurementSchema,
        says: "A measurement a line.",
        maxBytes: PART_BYTES,
      },
    },
    gives: {
      status: 200,
      types: { "application/json": { schema: partSchema, says: "The part, as it is there." } },
    },
    async answer({ desk: at, actor, key, request, parameters, query }) {
      const bytes = new Uint8Array(await request.arrayBuffer());
      checkDigest(request.headers, bytes);
      const defaults = present(query);
      const part = await desk.putPart(at, actor, { key, ...parameters, bytes, defaults });
      return new Response(`${JSON.stringify(part)}\n`, {
        headers: { "content-type": "application/json", "cache-control": "no-store" },
      });
    },
  }),
  route({
    method: "POST",
    path: "uploads/{upload}/post",
    group,
    summary: "Post what was uploaded",
    says: "Enters all parts, or nothing; the upload is gone once it is entered.",
    scope,
    once: true,
    parameters: named,
    gives: {
      status: 201,
      types: {
        "application/json": { schema: postedSchema, says: "What was entered." },
        [LINES]: { schema: postedLineSchema, says: "How far it is, then what was entered." },
      },
    },
    async answer({ desk: at, actor, log, key, answerType, parameters }) {
      if (answerType !== LINES) {
        return created(postedAnswer(await desk.postUpload(at, actor, { key, ...parameters })));
      }
      return linesAnswer(log, async (write) => {
        const tell = someOf(write, "progress");
        const posted = await desk.postUpload(at, actor, { key, ...parameters, tell });
        await write({ done: postedAnswer(posted) });
      });
    },
  }),
  route({
    method: "POST",
    path: "uploads/{upload}/preview",
    group,
    summary: "Try what was uploaded",
    says: "Tells each row's fate and what would change, and enters nothing; the upload stays.",
    scope,
    rate: "heavy",
    parameters: named,
    query: z.strictObject({ rows: whichRows }),
    gives: {
      status: 200,
      types: {
        [LINES]: { schema: previewLineSchema, says: "A line for each row, then the whole." },
      },
    },
    async answer({ desk: at, actor, log, key, parameters, query }) {
      return linesAnswer(log, async (write) => {
        const telling = { tell: someOf(write, "progress"), row: rowWriter(write, query.rows) };
        const preview = await desk.previewUpload(at, actor, { key, ...parameters, ...telling });
        await write({ preview });
      });
    },
  }),
  route({
    method: "DELETE",
    path: "uploads/{upload}",
    group,
    summary: "Give an upload up",
    scope,
    parameters: named,
    gives: { status: 204, types: {} },
    async answer({ desk: at, actor, key, parameters }) {
      await desk.deleteUpload(at, actor, { key, ...parameters });
      return new Response(null, { status: 204 });
    },
  }),
];

/** `Content-Digest: sha-256=:…:` (RFC 9530), or `Digest: sha-256=…` of the RFC before it. */
function checkDigest(headers: Headers, bytes: Uint8Array): void {
  const field = headers.get("content-digest") ?? headers.get("digest") ?? "";
  const given = /(?:^|[\s,])sha-256=:?([A-Za-z0-9+/]+=*):?/i.exec(field)?.[1];
  const digest = createHash("sha256").update(bytes).digest("base64");
  if (given === undefined || given === digest) return;
  throw new ApiError(
    "bad-request",
    `found a body of SHA-256 ${digest}; allowed ${given}, as stated`,
  );
}
