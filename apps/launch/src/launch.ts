/**
 * The launcher. Without a word it starts everything; with one it starts a part, for installations
 * that run parts on several machines:
 *
 *   launch            embedded PostgreSQL (or DATABASE_URL), migration, demo campaign, web, scorer
 *   launch migrate    migrates DATABASE_ADMIN_URL and makes the signing key if there is none
 *   launch web        the web server alone
 *   launch scorer     one scorer alone
 */
import { StoreError } from "@weighhouse/store/store-error";
import { readSettings } from "@weighhouse/store/settings";
import { migrateOnly } from "./migrate-only";
import { say } from "./say";
import { startEverything } from "./start-everything";
import { scorerProgram, startProgram, webProgram } from "./programs";

const parts = ["everything", "migrate", "web", "scorer"] as const;
type Part = (typeof parts)[number];

async function main(): Promise<number> {
  const word = process.argv[2] ?? "everything";
  if (!parts.includes(word as Part)) {
    say(`found "${word}"; allowed: ${parts.join(", ")}`);
    return 2;
  }
  const settings = readSettings(process.env);
  switch (word as Part) {
    case "migrate":
      return migrateOnly(settings);
    case "web":
      return startProgram(webProgram({ port: settings.PORT, host: "0.0.0.0" }), process.env).exited;
    case "scorer":
      return startProgram(scorerProgram(), process.env).exited;
    case "everything":
      return startEverything(settings);
  }
}

try {
  process.exit(await main());
} catch (error) {
  if (!(error instanceof StoreError)) throw error;
  say(error.message);
  process.exit(1);
}
