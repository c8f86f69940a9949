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

/**
 * Asks the server, with the key in WEIGHHOUSE_API_KEY where there is one.
 *
 * @throws {Refusal} 3 where it can't be reached or refuses
 */
export async function ask(
  address: URL,
  request: { accept: string; post?: unknown },
): Promise<Uint8Array> {
  const key = process.env.WEIGHHOUSE_API_KEY;
  const { accept, post } = request;
  let response: Response;
  let body: Uint8Array;
  try {
    response = await fetch(address, {
      ...(post === undefined ? {} : { method: "POST", body: JSON.stringify(post) }),
      headers: {
        accept,
        ...(post === undefined ? {} : { "content-type": "application/json" }),
        ...(key ? { authorization: `Bearer ${key}` } : {}),
      },
      redirect: "error",
    });
    body = new Uint8Array(await response.arrayBuffer());
  } catch (error) {
    throw new Refusal(3, [`${address.origin} could not be reached: ${reasonOf(error)}`], {
      cause: error,
    });
  }
  if (!response.ok) throw refused(address, response, body);
  return body;
}

const STATUS_WORDS: Record<number, string> = {
  401: "it asks for an API key (WEIGHHOUSE_API_KEY), or refuses the one given",
  403: "not allowed",
  404: "no such campaign, or none that may be read without an account",
  429: "too many requests; try again later",
};

function refused(address: URL, response: Response, body: Uint8Array): Refusal {
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
