/** npm start: installs, builds what is stale, and hands over to the launcher. */
import { spawn } from "node:child_process";
import path from "node:path";
import { build, install, requireNode, root } from "./scripts/steps.mjs";

requireNode();
await install();
await build();

const launcher = spawn(
  process.execPath,
  [path.join(root, "apps/launch/dist/launch.mjs"), ...process.argv.slice(2)],
  { cwd: root, stdio: "inherit", env: { ...process.env, NODE_ENV: "production" } },
);
// Ctrl-C reaches the whole process group: the launcher stops its parts and this process waits for it.
process.on("SIGINT", () => {});
process.on("SIGTERM", () => launcher.kill("SIGTERM"));
launcher.on("exit", (code, signal) => process.exit(code ?? (signal ? 1 : 0)));
