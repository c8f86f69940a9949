import { openKeys, openSealKey } from "@weighhouse/store/keys";
import { migrate } from "@weighhouse/store/migrate";
import type { Settings } from "@weighhouse/store/settings";
import { say } from "./say";

/** Migrates as the owner and makes the keys where their folder has none. */
export async function migrateOnly(settings: Settings): Promise<number> {
  const { DATABASE_ADMIN_URL: adminUrl, DATABASE_URL: url, WEIGHHOUSE_KEYS: keys } = settings;
  if (!adminUrl || !url || !keys) {
    say("migrate needs DATABASE_ADMIN_URL, DATABASE_URL and WEIGHHOUSE_KEYS");
    return 2;
  }
  const origin = settings.WEIGHHOUSE_ORIGIN ?? `http://localhost:${settings.PORT}`;
  await openKeys({ folder: keys, name: new URL(origin).hostname, make: true });
  openSealKey({ folder: keys, make: true });
  await migrate({ adminUrl, url });
  say("migrated");
  return 0;
}
