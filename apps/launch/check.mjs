/** npm run check: everything that can be said without running the program. The same in CI. */
import { readdirSync, existsSync } from "node:fs";
import path from "node:path";
import { bin, install, requireNode, root, run, say } from "./scripts/steps.mjs";

requireNode();
await install();

const projects = ["packages", "apps"]
  .flatMap((folder) => readdirSync(path.join(root, folder)).map((name) => `${folder}/${name}`))
  .concat("test")
  .filter((project) => existsSync(path.join(root, project, "tsconfig.json")));

const checks = [
  ["format", bin("prettier"), ["--check", "--log-level=warn", "."]],
  ["lint", bin("oxlint"), ["--deny-warnings"]],
  [
    "walls (imports go down only)",
    bin("depcruise"),
    [
      "packages",
      "apps",
      "test",
      "--config",
      ".dependency-cruiser.cjs",
      "--output-type",
      "err-long",
    ],
  ],
  ["unused code", bin("knip"), ["--no-progress"]],
  ...projects.map((project) => [`types of ${project}`, bin("tsc"), ["-p", project]]),
];

const failed = [];
for (const [name, command, args] of checks) {
  say(`check: ${name}`);
  if ((await run(command, args)) !== 0) failed.push(name);
}
if (failed.length > 0) {
  say(`check failed: ${failed.join("; ")}`);
  process.exit(1);
}
say(`check passed: ${checks.length} checks`);
