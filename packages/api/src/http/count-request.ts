import { isIP } from "node:net";
import type { Actor } from "@weighhouse/desk/desk";
import { takeTurn } from "@weighhouse/store/request-rates";
import type { Store } from "@weighhouse/store/open-store";
import { ApiError } from "./api-error";
import { rateLimit } from "./rate-classes";
import type { Counted, RateClass } from "./rate-classes";

/**
 * Counts a request for the key that it came with, else for who is signed in, else for its address.
 *
 * @returns the header fields that tell the client how it stands
 *   (draft-ietf-httpapi-ratelimit-headers-10)
 * @throws {ApiError} `too-many-requests` with Retry-After
 */
export async function countRequest(
  store: Store,
  rate: RateClass,
  request: { headers: Headers; actor: Actor },
): Promise<Record<string, string>> {
  const { counted, who } = subjectOf(request);
  const limit = rateLimit(rate, counted);
  const turn = await takeTurn(store, `${counted}:${who}:${rate}`, limit);
  const fields = {
    "ratelimit-policy": `"${rate}";q=${limit.requests};w=${limit.seconds}`,
    ratelimit: `"${rate}";r=${turn.remaining};t=${turn.secondsToWait}`,
  };
  if (turn.allowed) return fields;
  throw new ApiError(
    "too-many-requests",
    `found more than ${limit.requests} requests of the class ${rate} in ${limit.seconds} s; allowed again in ${turn.secondsToWait} s`,
    { ...fields, "retry-after": String(turn.secondsToWait) },
  );
}

function subjectOf({ headers, actor }: { headers: Headers; actor: Actor }): {
  counted: Counted;
  who: string;
} {
  if (actor?.through) {
    return { counted: "key", who: `${actor.through.campaign}/${actor.through.id}` };
  }
  if (actor) return { counted: "user", who: actor.userId };
  return { counted: "address", who: networkOf(addressOf(headers)) };
}

/** The last one is what the nearest proxy saw; those before it anybody may write. */
function addressOf(headers: Headers): string {
  return (headers.get("x-forwarded-for") ?? "").split(",").at(-1)!.trim();
}

/** An address as it is counted: of IPv6 the /64, which is one subscriber's (RFC 6177). */
export function networkOf(address: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address)?.[1];
  if (mapped !== undefined && isIP(mapped) === 4) return mapped;
  if (isIP(address) === 4) return address;
  if (isIP(address) !== 6) return "unknown";
  const [before = "", after] = address.toLowerCase().split("%")[0]!.split("::");
  const head = before === "" ? [] : before.split(":");
  const tail = after === undefined || after === "" ? [] : after.split(":");
  const zeros = after === undefined ? 0 : Math.max(0, 8 - head.length - tail.length);
  const groups = [...head, ...Array<string>(zeros).fill("0"), ...tail];
  return `${groups
    .slice(0, 4)
    .map((group) => group.replace(/^0+(?=.)/, ""))
    .join(":")}::/64`;
}
