import { existsSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { drizzle } from "drizzle-orm/postgres-js";
import { migrate as runMigrations } from "drizzle-orm/postgres-js/migrator";
import { runMigrations as runWorkerMigrations } from "graphile-worker";
import postgres from "postgres";
import type { Sql } from "postgres";
import { grants } from "./grants";
import { StoreError } from "./store-error";
import { quietWorkerLogger } from "./worker-logger";

/** Any number; the same in every process that migrates. */
const MIGRATION_LOCK = 7_205_511;

export type MigrateOptions = {
  /** The owner of the tables. */
  adminUrl: string;
  /** The running role: made, if the owner may make roles and it isn't there. */
  url: string;
  migrationsFolder?: string;
};

/** Migrates as the owner, graphile-worker's schema too, and grants the running role what it needs. */
export async function migrate(options: MigrateOptions): Promise<void> {
  const running = new URL(options.url);
  const role = decodeURIComponent(running.username);
  const owner = decodeURIComponent(new URL(options.adminUrl).username);
  if (role === "" || role === owner) {
    throw new StoreError(
      "owner-runs",
      `DATABASE_URL: found the role ${JSON.stringify(role)}; allowed is a role other than DATABASE_ADMIN_URL's, which owns the entries`,
    );
  }
  const sql = postgres(options.adminUrl, { max: 1, onnotice: () => {} });
  try {
    // Two launchers at once: the second waits, and finds everything done.
    await sql`select pg_advisory_lock(${MIGRATION_LOCK})`;
    await makeRole(sql, role, decodeURIComponent(running.password));
    await runMigrations(drizzle(sql), {
      migrationsFolder: options.migrationsFolder ?? findMigrations(),
    });
    await runWorkerMigrations({ connectionString: options.adminUrl, logger: quietWorkerLogger });
    await grantTo(sql, role);
  } finally {
    await sql.end();
  }
}

async function makeRole(sql: Sql, role: string, password: string): Promise<void> {
  const [there] = await sql`select 1 from pg_roles where rolname = ${role}`;
  if (there !== undefined) return;
  // CREATE ROLE takes no parameters: the server quotes both.
  const [statement] = await sql<{ text: string }[]>`
    select format('create role %I login password %L', ${role}::text, ${password}::text) as text`;
  await sql.unsafe(statement?.text ?? "");
}

async function grantTo(sql: Sql, role: string): Promise<void> {
  const to = sql(role);
  await sql.begin(async (tx) => {
    for (const [table, privileges] of Object.entries(grants)) {
      await tx`revoke all on ${tx(table)} from ${to}`;
      await tx`grant ${tx.unsafe(privileges)} on ${tx(table)} to ${to}`;
    }
    await tx`grant usage on schema graphile_worker to ${to}`;
    await tx`grant select on graphile_worker.migrations to ${to}`;
    const workerTables = await tx<{ name: string }[]>`
      select tablename as name from pg_tables
      where schemaname = 'graphile_worker' and tablename like '\\_private%'`;
    for (const { name } of workerTables) {
      const table = tx(`graphile_worker.${name}`);
      await tx`grant select, insert, update, delete on ${table} to ${to}`;
      // graphile-worker turns row security on and writes no policy: without one its rows are hidden.
      await tx`drop policy if exists weighhouse_running on ${table}`;
      await tx`create policy weighhouse_running on ${table} using (true) with check (true)`;
    }
    await tx`grant usage, select on all sequences in schema graphile_worker to ${to}`;
    await tx`grant execute on all functions in schema graphile_worker to ${to}`;
    await tx`grant select on graphile_worker.jobs to ${to}`;
  });
}

/** The nearest `migrations` folder above this file: in the sources and in a bundle alike. */
function findMigrations(): string {
  let folder = path.dirname(fileURLToPath(import.meta.url));
  for (;;) {
    const candidate = path.join(folder, "migrations");
    if (existsSync(path.join(candidate, "meta", "_journal.json"))) return candidate;
    const parent = path.dirname(folder);
    if (parent === folder) {
      throw new StoreError("not-migrated", `found no migrations folder above ${import.meta.url}`);
    }
    folder = parent;
  }
}
