import ipaddr from "ipaddr.js";

/**
 * Where deliveries may go. `public`: by https to addresses that the whole internet reaches;
 * `private`: by http too, and to this machine and the networks that it stands in.
 */
export const webhookReaches = ["public", "private"] as const;
export type WebhookReach = (typeof webhookReaches)[number];

const MOST_CHARACTERS = 2000;

/** What is wrong with a webhook's address before its name is looked up; null: nothing. */
export function addressFault(
  text: string,
  reach: WebhookReach,
): { found: string; allowed: string } | null {
  const schemes = reach === "public" ? ["https:"] : ["https:", "http:"];
  const allowed = `an ${schemes.map((one) => `${one}//`).join(" or ")} address of at most ${MOST_CHARACTERS} characters, without a user, a password or a #fragment`;
  if (!URL.canParse(text) || text.length > MOST_CHARACTERS) return { found: text, allowed };
  const url = new URL(text);
  if (!schemes.includes(url.protocol) || url.username || url.password || url.hash) {
    return { found: text, allowed };
  }
  const host = hostOf(url);
  if (!ipaddr.isValid(host) || mayBeTold(host, reach)) return null;
  return { found: host, allowed: "an address that the whole internet reaches" };
}

/** Whether a delivery may go to an IP address, one that a name was looked up to as well. */
export function mayBeTold(address: string, reach: WebhookReach): boolean {
  if (reach === "private") return true;
  if (!ipaddr.isValid(address)) return false;
  // Loopback, private, link-local, shared, multicast and the like each have another name; an IPv4
  // address within an IPv6 one counts as itself.
  return ipaddr.process(address).range() === "unicast";
}

/** The host of an address, an IPv6 one without its brackets. */
export function hostOf({ hostname }: URL): string {
  return hostname.replace(/^\[(.*)\]$/, "$1");
}
