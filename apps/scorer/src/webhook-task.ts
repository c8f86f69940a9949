import { createHash } from "node:crypto";
import { createSigner, httpbis } from "http-message-signatures";
import type { WebhookReach } from "@weighhouse/desk/webhook-address";
import type { Store } from "@weighhouse/store/open-store";
import { StoreError } from "@weighhouse/store/store-error";
import { readOutgoing, recordTry } from "@weighhouse/store/webhook-deliveries";
import type { Outgoing, Tried } from "@weighhouse/store/webhook-deliveries";
import { postToWebhook } from "./webhook-request";

/** What a receiver finds signed; it refuses a delivery where one of these is not. */
const COVERED = ["@method", "@target-uri", "content-type", "content-digest"];

/**
 * Sends one delivery and keeps how that went. Throws where it did not arrive, but at its last try: the
 * queue tries again, later each time.
 */
export async function webhookTask(
  store: Store,
  payload: unknown,
  { last, ...how }: { reach: WebhookReach; last: boolean; timeoutMs?: number },
): Promise<void> {
  const place = payload as { campaign: string; delivery: string };
  const tried = await tryOnce(store, place, how);
  if (tried === null) return;
  await recordTry(store, place, { tried, last });
  if (tried.ok) store.log.info({ ...place, status: tried.status }, "delivered");
  // The queue would keep a job that failed at its last try for ever; the delivery's own log tells it.
  else if (last) store.log.warn({ ...place, error: tried.error }, "gave a delivery up");
  else throw new Error(`${place.campaign}: ${tried.error}`);
}

/** Null where there is nothing to send any more. */
async function tryOnce(
  store: Store,
  place: { campaign: string; delivery: string },
  how: { reach: WebhookReach; timeoutMs?: number },
): Promise<Tried | null> {
  try {
    const outgoing = await readOutgoing(store, place);
    if (outgoing === null) return null;
    const body = Buffer.from(outgoing.body, "utf8");
    const headers = await signedHeaders(outgoing, body);
    return await postToWebhook({ url: outgoing.url, headers, body, ...how });
  } catch (error) {
    if (!(error instanceof StoreError)) throw error;
    if (error.code === "no-such-campaign") return null;
    // A secret that can't be read is a fault here; who looks at the log should know.
    return { ok: false, status: null, error: error.message };
  }
}

/** HTTP Message Signatures (RFC 9421) with hmac-sha256, over Content-Digest (RFC 9530) and the rest. */
async function signedHeaders(
  { url, webhook, secret }: Outgoing,
  body: Buffer,
): Promise<Record<string, string>> {
  const digest = createHash("sha256").update(body).digest("base64");
  const headers = {
    "content-type": "application/json",
    "content-digest": `sha-256=:${digest}:`,
    "user-agent": "Weighhouse",
  };
  const signed = await httpbis.signMessage(
    {
      key: createSigner(secret, "hmac-sha256", webhook),
      fields: COVERED,
      params: ["created", "keyid", "alg"],
      paramValues: { created: new Date() },
    },
    { method: "POST", url, headers },
  );
  return signed.headers as Record<string, string>;
}
