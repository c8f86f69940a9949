/** How dear a request is; what of each is let through a minute stands in one table. */
export type RateClass = "read" | "write" | "part" | "heavy";
