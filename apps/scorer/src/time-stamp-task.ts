import { randomBytes } from "node:crypto";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { readHeads } from "@weighhouse/store/read-ledger";
import type { Store } from "@weighhouse/store/open-store";
import { keepTimeStamp } from "@weighhouse/store/time-stamps";
import { timeStampRequest } from "@weighhouse/timestamps/request";
import { verifyToken } from "@weighhouse/timestamps/verify-token";

export type TimeStampAuthority = {
  url: string;
  /** PEM of the certificates that are trusted; undefined: its chain is not checked. */
  trusted: string | undefined;
};

const TIMEOUT_MS = 30_000;
/** A response with its certificates is some 5 kB. */
const MOST_BYTES = 100_000;

/**
 * Has a head's note time-stamped (RFC 3161), verifies the answer and keeps it. Throws where there is
 * none that is good: the queue tries again, later each time.
 */
export async function timeStampTask(
  store: Store,
  authority: TimeStampAuthority,
  payload: unknown,
): Promise<void> {
  const { campaign, size } = payload as { campaign: string; size: number };
  const head = (await readHeads(store, { campaign, size })).at(-1);
  if (head?.size !== size) throw new Error(`${campaign}: no signed head of size ${size}`);
  const data = new TextEncoder().encode(head.note);
  const nonce = new Uint8Array(randomBytes(16));
  const token = await ask(authority.url, timeStampRequest(nodeHasher(data), nonce));
  const checks = { data, sha256: nodeHasher, nonce, trusted: authority.trusted };
  const verdict = await verifyToken(token, checks);
  if (!verdict.ok) throw new Error(`${authority.url} gave no good time-stamp: ${verdict.reason}`);
  await keepTimeStamp(store, campaign, {
    size,
    token,
    at: verdict.at,
    authority: verdict.authority,
  });
  store.log.info({ campaign, size, at: verdict.at }, "time-stamped");
}

/** RFC 3161 section 3.4: by HTTP. */
async function ask(url: string, request: Uint8Array): Promise<Uint8Array> {
  const response = await fetch(url, {
    method: "POST",
    headers: { "content-type": "application/timestamp-query" },
    body: new Uint8Array(request),
    signal: AbortSignal.timeout(TIMEOUT_MS),
  });
  if (!response.ok) throw new Error(`${url} answered ${response.status}`);
  const body = new Uint8Array(await response.arrayBuffer());
  if (body.length > MOST_BYTES) throw new Error(`${url} answered with ${body.length} bytes`);
  return body;
}
