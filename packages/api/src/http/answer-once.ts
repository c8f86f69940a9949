import { createHash } from "node:crypto";
import type { Hash } from "node:crypto";
import type { Actor } from "@weighhouse/desk/desk";
import {
  claimAnswer,
  dropClaim,
  keepAnswer,
  renewClaim,
  RENEW_EVERY_MS,
} from "@weighhouse/store/kept-answers";
import type { AskedOnce, KeptAnswer } from "@weighhouse/store/kept-answers";
import { findMembership } from "@weighhouse/store/members";
import type { Context } from "../context";
import { ApiError } from "./api-error";
import { watchLastLine } from "./last-line";
import { withBody } from "./read-body";

const KEY_LENGTH = 255;

/**
 * Answers a request with an Idempotency-Key once (draft-ietf-httpapi-idempotency-key-header-07):
 * what comes again with the same key gets the first answer, read from what is kept for a day by
 * campaign and member. The body is digested while it is read, so that one of any size may come.
 *
 * Only what was entered is kept: a refusal enters nothing, so the key is free for another try.
 *
 * @throws {ApiError} `bad-request`, `in-flight`, `other-body`
 */
export async function answerOnce(
  ctx: Context,
  asked: { request: Request; campaign: string; actor: Actor },
  answer: (request: Request) => Promise<Response>,
): Promise<Response> {
  const { request, campaign, actor } = asked;
  const field = request.headers.get("idempotency-key");
  const { store } = ctx.desk;
  const place =
    field !== null && actor && (await findMembership(store, { campaign, userId: actor.userId }));
  // Who has no place there enters nothing, and is told so by the use-case.
  if (field === null || !place) return answer(request);
  const once = { campaign, member: place.member, key: readKey(field) };
  const claimed = await claimAnswer(store, once);
  if (claimed.claim === null) return answerAgain(request, claimed.kept);
  return answerFirst(ctx, { ...once, claim: claimed.claim, request }, answer);
}

/** A string of RFC 8941, or, as many clients send it, the same without quotes. */
function readKey(field: string): string {
  const key = /^"([^"\\]*)"$/.exec(field.trim())?.[1] ?? field.trim();
  if (key.length > 0 && key.length <= KEY_LENGTH && /^[!#-[\]-~]+$/.test(key)) return key;
  throw new ApiError(
    "bad-request",
    `found Idempotency-Key: ${field.slice(0, KEY_LENGTH)}; allowed 1 to ${KEY_LENGTH} visible letters, in quotes`,
  );
}

async function answerAgain(request: Request, kept: KeptAnswer | null): Promise<Response> {
  if (kept === null) {
    const words = "found a request with this Idempotency-Key that is still being worked on";
    throw new ApiError("in-flight", `${words}; allowed again once it is answered`, {
      "retry-after": "1",
    });
  }
  const hash = requestHash(request);
  for await (const chunk of request.body ?? []) hash.update(chunk as Uint8Array);
  if (!hash.digest().equals(kept.digest)) {
    const words = "found another request than the first one with this Idempotency-Key";
    throw new ApiError("other-body", `${words}; allowed the same again, or another key`);
  }
  return new Response(kept.status === 204 ? null : new Uint8Array(kept.body), {
    status: kept.status,
    headers: { ...kept.headers, "idempotency-replayed": "true" },
  });
}

type First = AskedOnce & { claim: string; request: Request };

async function answerFirst(
  { desk: { store }, log }: Context,
  first: First,
  answer: (request: Request) => Promise<Response>,
): Promise<Response> {
  const { claim, request, ...once } = first;
  const renewal = setInterval(() => {
    renewClaim(store, claim, once).catch((error: unknown) =>
      log.warn({ error: String(error) }, "a claim could not be renewed"),
    );
  }, RENEW_EVERY_MS);
  renewal.unref();
  const drop = async () => {
    clearInterval(renewal);
    await dropClaim(store, claim, once);
  };
  const keep = async (kept: KeptAnswer) => {
    clearInterval(renewal);
    await keepAnswer(store, claim, once, kept);
  };
  const digested = digestBody(request);
  try {
    const answered = await answer(digested.request);
    if (!answered.ok) {
      await drop();
      return answered;
    }
    return await keeping(answered, { digest: digested.digest, keep, drop });
  } catch (error) {
    await drop();
    throw error;
  }
}

/** Where and as what a body was sent is part of what was asked. */
function requestHash(request: Request): Hash {
  const { pathname, search } = new URL(request.url);
  const type = request.headers.get("content-type") ?? "";
  return createHash("sha256").update(`${request.method} ${pathname}${search}\n${type}\n`);
}

/** The same request, digested while its body is read; what the route had no use for is read then. */
function digestBody(request: Request): { request: Request; digest(): Promise<Uint8Array> } {
  const hash = requestHash(request);
  if (request.body === null) return { request, digest: async () => hash.digest() };
  let ended = false;
  const digesting = new TransformStream<Uint8Array, Uint8Array>({
    transform(chunk, controller) {
      hash.update(chunk);
      controller.enqueue(chunk);
    },
    flush() {
      ended = true;
    },
  });
  const given = withBody(request, request.body.pipeThrough(digesting));
  const digest = async () => {
    if (!given.bodyUsed) for await (const _ of given.body!);
    if (!ended) throw new Error("found an answer that was made before its body's end");
    return hash.digest();
  };
  return { request: given, digest };
}

type Keeping = {
  digest(): Promise<Uint8Array>;
  keep(answer: KeptAnswer): Promise<void>;
  drop(): Promise<void>;
};

async function keeping(answered: Response, { digest, keep, drop }: Keeping): Promise<Response> {
  const { status } = answered;
  const headers = Object.fromEntries(answered.headers);
  if (answered.body === null || headers["content-type"] !== "application/x-ndjson") {
    const body = new Uint8Array(await answered.arrayBuffer());
    await keep({ digest: await digest(), status, headers, body });
    return new Response(answered.status === 204 ? null : body, { status, headers });
  }
  const body = watchLastLine(answered.body, {
    // Of an answer by lines the last is the answer; those before it tell how far the work is.
    ended: async (line) => {
      if (/^\s*\{\s*"problem"/.test(line)) return drop();
      return keep({
        digest: await digest(),
        status,
        headers,
        body: new TextEncoder().encode(line),
      });
    },
    broken: drop,
  });
  return new Response(body, { status, headers });
}
