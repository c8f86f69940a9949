import { setTimeout as sleep } from "node:timers/promises";
import { Refusal } from "../refusal";
import { send } from "../server";
import type { Sent } from "../server";

const MOST_TRIES = 5;
const FIRST_WAIT_MS = 500;
const LONGEST_WAIT_MS = 60_000;

/**
 * Sends what may be sent twice: a line that breaks and a server that is busy are tried again, after as
 * long as the server asks for, else twice as long each time.
 */
export async function sendPatiently(address: URL, request: Sent): Promise<Response> {
  for (let tries = 1; ; tries += 1) {
    const last = tries === MOST_TRIES;
    let waitMs = FIRST_WAIT_MS * 2 ** (tries - 1);
    try {
      const response = await send(address, request);
      if (last || ![429, 502, 503, 504].includes(response.status)) return response;
      await response.body?.cancel();
      waitMs = askedWaitMs(response) ?? waitMs;
    } catch (error) {
      if (last || !(error instanceof Refusal)) throw error;
    }
    await sleep(Math.min(waitMs, LONGEST_WAIT_MS));
  }
}

/** Retry-After (RFC 9110, 10.2.3) in seconds; a date is left to our own waiting. */
function askedWaitMs(response: Response): number | null {
  const field = response.headers.get("retry-after") ?? "";
  return /^\d{1,6}$/.test(field) ? Number(field) * 1000 : null;
}
