import { lookup } from "node:dns";
import http from "node:http";
import https from "node:https";
import type { LookupFunction } from "node:net";
import { isIP } from "node:net";
import { hostOf, mayBeTold } from "@weighhouse/desk/webhook-address";
import type { WebhookReach } from "@weighhouse/desk/webhook-address";
import type { Tried } from "@weighhouse/store/webhook-deliveries";

const TIMEOUT_MS = 10_000;

export type WebhookRequest = {
  url: string;
  headers: Record<string, string>;
  body: Buffer;
  reach: WebhookReach;
  timeoutMs?: number;
};

/**
 * Posts to an address that somebody else chose. The IP address that is connected to is the one that
 * was looked at, so that a name can't be looked up to another in between; redirects aren't followed,
 * and of the answer nothing is read but its status.
 */
export function postToWebhook(request: WebhookRequest): Promise<Tried> {
  const { headers, body, reach, timeoutMs = TIMEOUT_MS } = request;
  const url = new URL(request.url);
  const scheme = url.protocol === "https:" ? https : http;
  const host = hostOf(url);
  if (url.protocol !== "https:" && reach === "public") {
    return Promise.resolve(failed("http is not allowed here, https is"));
  }
  // A literal address is connected to without being looked up.
  if (isIP(host) !== 0 && !mayBeTold(host, reach)) return Promise.resolve(failed(notTold(host)));
  return new Promise((resolve) => {
    const sent = scheme.request(url, {
      method: "POST",
      headers: { ...headers, "content-length": body.length },
      // A connection of its own: one kept alive was looked at for another delivery.
      agent: false,
      lookup: lookupFor(reach),
      signal: AbortSignal.timeout(timeoutMs),
    });
    sent.on("response", (response) => {
      resolve(statusOutcome(response.statusCode ?? 0));
      sent.destroy();
    });
    sent.on("error", (error: Error & { code?: string }) => {
      const late = error.name === "AbortError" || error.name === "TimeoutError";
      resolve(failed(late ? `no answer within ${timeoutMs / 1000} s` : wordsOf(error)));
    });
    sent.end(body);
  });
}

function statusOutcome(status: number): Tried {
  if (status >= 200 && status < 300) return { ok: true, status };
  const redirect = status >= 300 && status < 400 ? ", and redirects are not followed" : "";
  return { ok: false, status, error: `it answered ${status}${redirect}` };
}

function lookupFor(reach: WebhookReach): LookupFunction {
  return (name, options, callback) => {
    lookup(name, { ...options, all: true }, (error, addresses) => {
      if (error) return callback(error, "");
      const refused = addresses.find(({ address }) => !mayBeTold(address, reach));
      if (refused) return callback(new Error(notTold(refused.address)), "");
      if (options.all) return callback(null, addresses);
      return callback(null, addresses[0]!.address, addresses[0]!.family);
    });
  };
}

function notTold(address: string): string {
  return `${address} is not an address that the whole internet reaches`;
}

function wordsOf(error: Error & { code?: string }): string {
  if (error instanceof AggregateError) return wordsOf(error.errors[0] as Error);
  return error.message || (error.code ?? String(error));
}

function failed(error: string): Tried {
  return { ok: false, status: null, error };
}
