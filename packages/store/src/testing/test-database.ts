import { randomBytes } from "node:crypto";
import postgres from "postgres";
import { migrate } from "../migrate";

export type TestDatabase = { url: string; adminUrl: string; drop(): Promise<void> };

const TEMPLATE = "WEIGHHOUSE_TEST_DATABASE_TEMPLATE";
const RUNNING_URL = "WEIGHHOUSE_TEST_DATABASE_URL";

/** A fresh migrated database, made from the run's template: some 50 ms. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const admin = process.env["WEIGHHOUSE_TEST_DATABASE_ADMIN_URL"];
  const running = process.env[RUNNING_URL];
  const template = process.env[TEMPLATE];
  if (admin === undefined || running === undefined || template === undefined) {
    throw new Error("no test database: allowed is the vitest project `database`");
  }
  const name = `test_${randomBytes(6).toString("hex")}`;
  await administer(admin, `create database ${name} template ${template}`);
  return {
    url: withDatabase(running, name),
    adminUrl: withDatabase(admin, name),
    drop: () => administer(admin, `drop database if exists ${name} with (force)`),
  };
}

/** Makes the migrated template and the running role of this run; returns what takes them away. */
export async function makeTemplate(adminUrl: string): Promise<() => Promise<void>> {
  const name = `template_${randomBytes(6).toString("hex")}`;
  const role = `running_${randomBytes(6).toString("hex")}`;
  const running = new URL(withDatabase(adminUrl, name));
  running.username = role;
  running.password = randomBytes(12).toString("hex");
  await administer(adminUrl, `create database ${name}`);
  await migrate({ adminUrl: withDatabase(adminUrl, name), url: running.href });
  process.env[TEMPLATE] = name;
  process.env[RUNNING_URL] = running.href;
  return async () => {
    await administer(adminUrl, `drop database if exists ${name} with (force)`);
    await administer(adminUrl, `drop role if exists ${role}`);
  };
}

async function administer(adminUrl: string, statement: string): Promise<void> {
  const sql = postgres(adminUrl, { max: 1, onnotice: () => {} });
  try {
    await sql.unsafe(statement);
  } finally {
    await sql.end();
  }
}

function withDatabase(url: string, name: string): string {
  const changed = new URL(url);
  changed.pathname = `/${name}`;
  return changed.href;
}
