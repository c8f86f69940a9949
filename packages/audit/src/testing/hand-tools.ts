import { execFileSync } from "node:child_process";
import { writeFileSync } from "node:fs";
import path from "node:path";
import { execPath } from "node:process";

type Tool = keyof typeof standIns;

/**
 * Writes stand-ins for jq and openssl into a folder, to be put before PATH. A machine with nothing
 * but Node has neither; there the stand-ins answer what the README asks of them, so that its shell
 * is still run.
 *
 * @param which `missing`: only for tools that aren't installed
 */
export function placeStandIns(folder: string, which: "missing" | "all"): string {
  for (const tool of Object.keys(standIns) as Tool[]) {
    if (which === "missing" && isInstalled(tool)) continue;
    const script = `#!${execPath}\n${standIns[tool]}`;
    writeFileSync(path.join(folder, tool), script, { mode: 0o755 });
  }
  return folder;
}

function isInstalled(tool: string): boolean {
  try {
    execFileSync("bash", ["-c", `command -v ${tool}`], { stdio: "ignore" });
    return true;
  } catch {
    return false;
  }
}

const standIns = {
  jq: `
const { readFileSync } = require("node:fs");
const [flags, filter, file] = process.argv.slice(2);
const texts = readFileSync(file, "utf8").trim();
const values = file.endsWith(".ndjson") ? texts.split("\\n").map((t) => JSON.parse(t)) : [JSON.parse(texts)];
const increasing = (list) => list.every((value, at) => at === 0 || list[at - 1] < value);
if (filter.startsWith(".files[]")) {
  for (const { sha256, path } of values[0].files) console.log(sha256 + "  " + path);
} else if (filter === ".payloadSha256") {
  for (const { payloadSha256 } of values) console.log(payloadSha256);
} else {
  const good = values.every(({ seq }, at) => seq === at) && increasing(values.map(({ at }) => at));
  console.log(good);
  process.exit(good ? 0 : 1);
}
`,
  openssl: `
const { readFileSync } = require("node:fs");
const { createPublicKey, verify } = require("node:crypto");
const given = process.argv.slice(2);
const option = (name) => readFileSync(given[given.indexOf(name) + 1]);
if (given[0] === "base64") {
  process.stdout.write(Buffer.from(readFileSync(0, "utf8"), "base64"));
} else {
  const key = createPublicKey({ key: option("-inkey"), format: "der", type: "spki" });
  const good = verify(null, option("-in"), key, option("-sigfile"));
  console.log(good ? "Signature Verified Successfully" : "Signature Verification Failure");
  process.exit(good ? 0 : 1);
}
`,
};
