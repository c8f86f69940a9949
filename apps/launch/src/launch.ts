/**
 * The launcher. Without a word it starts everything; with one it starts a part, for installations
 * that run parts on several machines:
 *
 *   launch            embedded PostgreSQL (or DATABASE_URL), migration, demo campaign, web, scorer
 *   launch migrate    migrates DATABASE_ADMIN_URL and makes the signing key if there is none
 *   launch web        the web server alone
 *   launch scorer     one scorer alone
 *   launch declare-restore "REASON"
 *                     puts on record that the database was restored from a backup
 *   launch rotate-key makes a new signing key; heads signed by the old one stay good
 */
import { readSettings } from "@weighhouse/store/settings";
import { declareRestore } from "./declare-restore";
import { migrateOnly } from "./migrate-only";
import { say } from "./say";
import { startEverything } from "./start-everything";
import { rotateKeyOf } from "./rotate-key";
import { runAlone, scorerProgram, webProgram } from "./programs";
import { refusalOf } from "./refusal";

const parts = ["everything", "migrate", "web", "scorer", "declare-restore", "rotate-key"] as const;
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
      return runAlone(webProgram({ port: settings.PORT, host: "0.0.0.0" }));
    case "scorer":
      return runAlone(scorerProgram());
    case "declare-restore":
      return declareRestore(settings, process.argv.slice(3));
    case "rotate-key":
      return rotateKeyOf(settings);
    case "everything":
      return startEverything(settings);
  }
}

try {
  process.exit(await main());
} catch (error) {
  const refusal = refusalOf(error);
  if (refusal === null) throw error;
  say(refusal);
  process.exit(1);
}
