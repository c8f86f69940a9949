import type { ISql } from "postgres";

/** What runs a statement, in a transaction or out of one. */
export type Queries = ISql;
