import type { CommandDef } from "citty";
import { run } from "./run";

/** Each command loads only when it runs: `--help` needs no engine. */
const commands: Record<string, () => Promise<CommandDef>> = {
  score: () => import("./commands/score").then((module) => module.score as CommandDef),
  check: () => import("./commands/check").then((module) => module.check as CommandDef),
  verify: () => import("./commands/verify").then((module) => module.verify as CommandDef),
  export: () => import("./commands/export").then((module) => module.exportTrail as CommandDef),
};

// Set, not exit(): what is still being written to a pipe must go out.
process.exitCode = await run(process.argv.slice(2), commands);
