import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import type { PostgresJsDatabase } from "drizzle-orm/postgres-js";
import type { Sql } from "postgres";
import { StoreError } from "./store-error";
import type * as schema from "./schema/tables";

export type Log = {
  info(fields: object, message: string): void;
  warn(fields: object, message: string): void;
  error(fields: object, message: string): void;
};

export type Store = {
  /** postgres.js, for appends and bulk rows: drizzle changes the serializers of its own client. */
  readonly sql: Sql;
  /** drizzle, for reads and single rows (writes and better-auth too). */
  readonly db: PostgresJsDatabase<typeof schema>;
  /** drizzle on the replica (DATABASE_READ_URL) where there is one, else `db`. */
  readonly readDb: PostgresJsDatabase<typeof schema>;
  readonly url: string;
  readonly signer: TreeHeadSigner | null;
  readonly log: Log;
  close(): Promise<void>;
};

export type StoreOptions = {
  url: string;
  readUrl?: string | undefined;
  /** null: this process appends nothing (a scorer). */
  signer: TreeHeadSigner | null;
  log?: Log;
  /** Connections for each of the two clients; 8 unless given. */
  connections?: number;
};

/**
 * Opens the store: refuses a running role that owns the entries, a database that isn't migrated, and
 * a signing key that the database doesn't list (the first key ever is enrolled).
 */
export async function openStore(options: StoreOptions): Promise<Store> {
  throw new StoreError("not-migrated", options.url);
}
