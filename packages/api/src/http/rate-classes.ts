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

const classes = Object.keys(requests) as RateClass[];

/** The table, a row for each class. */
export function rateRows(): ({ rate: RateClass } & Record<Counted, number>)[] {
  return classes.map((rate) => ({ rate, ...requests[rate] }));
}
