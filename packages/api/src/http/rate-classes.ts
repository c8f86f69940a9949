import type { RateLimit } from "@weighhouse/store/request-rates";

/** How dear a request is: `heavy` ones score or write archives, `part` is a piece of an upload. */
export type RateClass = "read" | "write" | "part" | "heavy" | "bad-key";

/** Whose requests are counted together. */
export type Counted = "key" | "user" | "address";

const SECONDS = 60;

/**
 * How many requests a minute are let through. A key is a pipeline that posts a batch every few
 * seconds; an address without an account may be a whole institute behind one router, or a crawler.
 * `bad-key` counts refused keys alone: a pipeline with an expired one keeps trying for ever.
 */
const requests: Record<RateClass, Record<Counted, number>> = {
  read: { key: 600, user: 600, address: 240 },
  write: { key: 240, user: 240, address: 60 },
  part: { key: 600, user: 600, address: 60 },
  heavy: { key: 60, user: 60, address: 30 },
  "bad-key": { key: 30, user: 30, address: 30 },
};

export function rateLimit(rate: RateClass, counted: Counted): RateLimit {
  return { requests: requests[rate][counted], seconds: SECONDS };
}

/** The table in words, for the API's description. */
export function rateTable(): string {
  const rows = Object.entries(requests).map(
    ([rate, { key, user, address }]) =>
      `${rate}: ${key} by key, ${user} by account, ${address} by address`,
  );
  return `A minute allows, by class: ${rows.join("; ")}.`;
}
