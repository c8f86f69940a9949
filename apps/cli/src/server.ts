import { Refusal, wrongUsage } from "./refusal";
import { harmless } from "./terminal";

const DEFAULT_URL = "http://localhost:3000";

/** An address below a campaign's on the server that WEIGHHOUSE_URL names. */
export function campaignAddress(campaign: string, path: string): URL {
  const base = process.env.WEIGHHOUSE_URL || DEFAULT_URL;
  if (!/^https?:\/\//.test(base) || !URL.canParse(base)) {
    throw wrongUsage(`found WEIGHHOUSE_URL ${base}; allowed an http or https address`);
  }
  return new URL(`${base.replace(/\/+$/, "")}/api/v1/campaigns/${campaign}/${path}`);
}

/** Refuses what can't be a campaign's key before anything is asked. */
export function requireCampaignKey(text: string): string {
  if (/^[a-z0-9][a-z0-9-]{0,63}$/.test(text)) return text;
  throw wrongUsage(
    `found --campaign ${text}; allowed a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit`,
  );
}

/**
 * Asks the server, with the key in WEIGHHOUSE_API_KEY where there is one.
 *
 * @throws {Refusal} 3 where it can't be reached or refuses
 */
export async function ask(
  address: URL,
  request: { accept: string; post?: unknown },
): Promise<Uint8Array> {
  const { accept, post } = request;
  const sent: Sent = { headers: { accept } };
  if (post !== undefined) {
    sent.method = "POST";
    sent.body = JSON.stringify(post);
    sent.headers["content-type"] = "application/json";
  }
  const response = await send(address, sent);
  const body = await bodyOf(address, response);
  if (!response.ok) throw refused(address, response, body);
  return body;
}

export type Sent = {
  method?: string;
  body?: string | Uint8Array<ArrayBuffer>;
  headers: Record<string, string>;
};

/**
 * Sends a request with the key, and gives the answer before its body has come, whatever its status.
 *
 * @throws {Refusal} 3 where the server can't be reached
 */
export async function send(address: URL, { headers, ...request }: Sent): Promise<Response> {
  const key = process.env.WEIGHHOUSE_API_KEY;
  try {
    return await fetch(address, {
      ...request,
      headers: { ...headers, ...(key ? { authorization: `Bearer ${key}` } : {}) },
      redirect: "error",
    });
  } catch (error) {
    throw unreachable(address, error);
  }
}

export async function bodyOf(address: URL, response: Response): Promise<Uint8Array> {
  try {
    return new Uint8Array(await response.arrayBuffer());
  } catch (error) {
    throw unreachable(address, error);
  }
}

export function unreachable(address: URL, error: unknown): Refusal {
  return new Refusal(3, [`${address.origin} could not be reached: ${reasonOf(error)}`], {
    cause: error,
  });
}

const STATUS_WORDS: Record<number, string> = {
  401: "it asks for an API key (WEIGHHOUSE_API_KEY), or refuses the one given",
  403: "not allowed",
  404: "no such campaign, or none that may be read without an account",
  429: "too many requests; try again later",
};

/** What the server refuses, in its own words. */
export function refused(address: URL, response: Response, body: Uint8Array): Refusal {
  const { status, statusText } = response;
  const why = [STATUS_WORDS[status] ?? statusText, detailOf(body)].filter(Boolean).join("; ");
  return new Refusal(3, [`${address.href} answered ${status}: ${why}`]);
}

/** The server's own words, where it answers with problem details (RFC 9457). */
function detailOf(body: Uint8Array): string | null {
  try {
    const answer: unknown = JSON.parse(new TextDecoder().decode(body.subarray(0, 10_000)));
    const detail = (answer as { detail?: unknown } | null)?.detail;
    return typeof detail === "string" ? harmless(detail) : null;
  } catch {
    return null;
  }
}

function reasonOf(error: unknown): string {
  const cause = error instanceof Error ? (error.cause ?? error) : error;
  if (cause instanceof AggregateError && cause.errors.length > 0) return reasonOf(cause.errors[0]);
  return cause instanceof Error ? cause.message : String(cause);
}
