import { z } from "zod";
import { StoreError } from "./store-error";

const postgresUrl = z
  .string()
  .regex(/^postgres(ql)?:\/\/.+/, "a postgres:// address is allowed")
  .optional();

const logLevels = ["trace", "debug", "info", "warn", "error", "fatal", "silent"] as const;

export const settingsSchema = z.object({
  DATABASE_URL: postgresUrl,
  DATABASE_ADMIN_URL: postgresUrl,
  DATABASE_READ_URL: postgresUrl,
  WEIGHHOUSE_HOME: z.string().min(1).optional(),
  WEIGHHOUSE_KEYS: z.string().min(1).optional(),
  WEIGHHOUSE_ORIGIN: z
    .string()
    .regex(
      /^https?:\/\/[^/\s]+$/,
      "an address without path is allowed, such as http://localhost:3000",
    )
    .optional(),
  /** A time-stamp authority (RFC 3161 over HTTP); without, heads aren't time-stamped. */
  WEIGHHOUSE_TSA_URL: z
    .string()
    .regex(/^https?:\/\/[^/\s]+(\/\S*)?$/, "an http or https address is allowed")
    .optional(),
  /** File of PEM certificates to one of which the authority's must lead. */
  WEIGHHOUSE_TSA_CA: z.string().min(1).optional(),
  /** Where webhooks may lead: `private` also to this machine and its networks, and by plain http. */
  WEIGHHOUSE_WEBHOOKS: z
    .enum(["public", "private"], "public or private is allowed")
    .default("public"),
  /** Signs sessions; the launcher with the embedded database makes one by itself. */
  WEIGHHOUSE_SECRET: z.string().min(32, "32 characters or more are allowed").optional(),
  PORT: z.coerce
    .number("a whole number from 1 to 65535 is allowed")
    .int("a whole number from 1 to 65535 is allowed")
    .min(1, "a whole number from 1 to 65535 is allowed")
    .max(65535, "a whole number from 1 to 65535 is allowed")
    .default(3000),
  LOG_LEVEL: z.enum(logLevels, `one of ${logLevels.join(", ")} is allowed`).default("info"),
});

export type Settings = z.infer<typeof settingsSchema>;

/** Reads the environment once; every wrong setting is named with what was found and is allowed. */
export function readSettings(environment: Record<string, string | undefined>): Settings {
  const names = Object.keys(settingsSchema.shape);
  const given = Object.fromEntries(
    names.filter((name) => environment[name]).map((name) => [name, environment[name]]),
  );
  const read = settingsSchema.safeParse(given);
  if (read.success) return read.data;
  const lines = read.error.issues.map(
    (issue) => `${issue.path.join(".")}: found ${shown(issue.path, given)}; ${issue.message}`,
  );
  throw new StoreError("bad-settings", `settings in the environment:\n${lines.join("\n")}`);
}

function shown(path: PropertyKey[], given: Record<string, string | undefined>): string {
  const name = String(path[0]);
  // Addresses hold passwords, and the secret is one.
  return /DATABASE|SECRET/.test(name) ? "(not shown)" : JSON.stringify(given[name] ?? null);
}
