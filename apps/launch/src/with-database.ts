import path from "node:path";
import { defaultHome, startEmbeddedPostgres } from "@weighhouse/store/embedded";
import { silentLog } from "@weighhouse/store/log";
import type { Settings } from "@weighhouse/store/settings";

export type Place = { url: string; keys: string; origin: string };

/** Does something on the database that the settings name, or on the embedded one, started for it. */
export async function withDatabase<T>(
  settings: Settings,
  act: (place: Place) => Promise<T>,
): Promise<T> {
  const home = settings.WEIGHHOUSE_HOME ?? defaultHome();
  const keys = settings.WEIGHHOUSE_KEYS ?? path.join(home, "keys");
  const origin = settings.WEIGHHOUSE_ORIGIN ?? `http://localhost:${settings.PORT}`;
  if (settings.DATABASE_URL !== undefined) return act({ url: settings.DATABASE_URL, keys, origin });
  const database = await startEmbeddedPostgres({ home, log: silentLog });
  try {
    return await act({ url: database.url, keys, origin });
  } finally {
    await database.stop();
  }
}
