import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { drizzle } from "drizzle-orm/postgres-js";
import type { PostgresJsDatabase } from "drizzle-orm/postgres-js";
import postgres from "postgres";
import type { Sql } from "postgres";
import { ledgerTables } from "./grants";
import { instantFromPostgres } from "./instant";
import type { KeptHeads } from "./kept-heads";
import { silentLog } from "./log";
import type { Log } from "./log";
import { requireNotBehind } from "./restored";
import type { SealKey } from "./seal-key";
import * as schema from "./schema/tables";
import { requireListedKey } from "./signing-keys";
import { StoreError } from "./store-error";

export type { Log } from "./log";

export type Database = PostgresJsDatabase<typeof schema>;

export type Store = {
  /** postgres.js, for appends and bulk rows: drizzle changes the serializers of its own client. */
  readonly sql: Sql;
  /** drizzle, for reads and single rows (writes and better-auth too). */
  readonly db: Database;
  /** drizzle on the replica (DATABASE_READ_URL) where there is one, else `db`. */
  readonly readDb: Database;
  readonly url: string;
  readonly signer: TreeHeadSigner | null;
  /** null: this process holds no seals' contents. */
  readonly sealKey: SealKey | null;
  /** Where the last signed heads are kept outside the database; null: nowhere (tests). */
  readonly keptHeads: KeptHeads | null;
  readonly log: Log;
  close(): Promise<void>;
};

export type StoreOptions = {
  url: string;
  readUrl?: string | undefined;
  /** null: this process appends nothing (a scorer). */
  signer: TreeHeadSigner | null;
  sealKey?: SealKey | null;
  keptHeads?: KeptHeads | null;
  log?: Log;
  /** Connections for each of the two clients; 8 unless given. */
  connections?: number;
};

/**
 * Opens the store: refuses a running role that owns the entries, a database that isn't migrated, and
 * a signing key that the database doesn't list (the first key ever is enrolled), and a database that
 * is behind the last heads kept outside it.
 */
export async function openStore(options: StoreOptions): Promise<Store> {
  const max = options.connections ?? 8;
  const sql = connect(options.url, max);
  const client = connect(options.url, max);
  const readClient = options.readUrl === undefined ? null : connect(options.readUrl, max);
  const db = drizzle(client, { schema });
  const close = async () => {
    await Promise.all([sql, client, readClient].map((each) => each?.end({ timeout: 5 })));
  };
  try {
    await requireRunningRole(sql);
    if (options.signer !== null) await requireListedKey(sql, options.signer);
    if (options.keptHeads) await requireNotBehind(sql, options.keptHeads);
  } catch (error) {
    await close();
    throw error;
  }
  return {
    sql,
    db,
    readDb: readClient === null ? db : drizzle(readClient, { schema }),
    url: options.url,
    signer: options.signer,
    sealKey: options.sealKey ?? null,
    keptHeads: options.keptHeads ?? null,
    log: options.log ?? silentLog,
    close,
  };
}

/** A client that gives instants and JSON as texts, all times in UTC. */
export function connect(url: string, max: number): Sql {
  const asText = (oid: number, parse: (text: string) => string) => ({
    to: oid,
    from: [oid],
    serialize: (value: string) => value,
    parse,
  });
  return postgres(url, {
    max,
    types: { instant: asText(1184, instantFromPostgres), json: asText(114, (text) => text) },
    connection: { TimeZone: "UTC", application_name: "weighhouse" },
    onnotice: () => {},
  }) as unknown as Sql;
}

async function requireRunningRole(sql: Sql): Promise<void> {
  const tables = await sql<{ name: string; role: string; owns: boolean; changes: boolean }[]>`
    select c.relname as name, current_user as role,
      pg_has_role(current_user, c.relowner, 'USAGE') as owns,
      has_table_privilege(c.oid, 'UPDATE, DELETE, TRUNCATE, TRIGGER') as changes
    from pg_class c
    where c.relnamespace = 'public'::regnamespace and c.relname in ${sql([...ledgerTables])}`;
  if (tables.length < ledgerTables.length) {
    throw new StoreError(
      "not-migrated",
      "DATABASE_URL: found a database without the ledger's tables; allowed is one that DATABASE_ADMIN_URL has migrated",
    );
  }
  for (const { name, role, owns, changes } of tables) {
    if (owns || changes) {
      const what = owns ? "owns" : "may change";
      throw new StoreError(
        "owner-runs",
        `DATABASE_URL: found the role ${role}, which ${what} the table ${name}; allowed is a role that can only read and append there`,
      );
    }
  }
}
