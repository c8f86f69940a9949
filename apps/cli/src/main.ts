import type { CommandDef } from "citty";
import { run } from "./run";

// The exit code is set, not exited with: what is still being written to a pipe must go out.
process.exitCode = await run(process.argv.slice(2), {
  score: () => import("./commands/score").then((module) => module.score as CommandDef),
  check: () => import("./commands/check").then((module) => module.check as CommandDef),
  sensitivity: () =>
    import("./commands/sensitivity").then((module) => module.sensitivity as CommandDef),
  plan: () => import("./commands/plan").then((module) => module.plan as CommandDef),
  simulate: () => import("./commands/simulate").then((module) => module.simulate as CommandDef),
  chance: () => import("./commands/chance").then((module) => module.chance as CommandDef),
  verify: () => import("./commands/verify").then((module) => module.verify as CommandDef),
  seal: () => import("./commands/seal").then((module) => module.seal as CommandDef),
  reveal: () => import("./commands/reveal").then((module) => module.reveal as CommandDef),
  watch: () => import("./commands/watch").then((module) => module.watch as CommandDef),
  post: () => import("./commands/post").then((module) => module.post as CommandDef),
  export: () => import("./commands/export").then((module) => module.exportTrail as CommandDef),
});
