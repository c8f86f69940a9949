import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { execPath } from "node:process";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { expect, test } from "vitest";
import { duneDocument } from "./testing/documents";

/**
 * Pages forbid making code from strings (CSP without 'unsafe-eval'). Node's flag does the same to a
 * whole process, so that a library that tries fails here first.
 */
test("a document with expressions and units is read where no code may be made from strings", async () => {
  const folder = mkdtempSync(join(tmpdir(), "campaign-without-eval-"));
  try {
    const outfile = join(folder, "read.mjs");
    await build({
      stdin: {
        contents: `
          import { readCampaignText } from "./read";
          let refused = false;
          try { new Function("return 1")(); } catch { refused = true; }
          let text = "";
          process.stdin.on("data", (chunk) => (text += chunk));
          process.stdin.on("end", () => {
            const good = readCampaignText(text);
            const bad = readCampaignText(text.replace('"f0 + h + c"', '"f0 + q"'));
            console.log(JSON.stringify({ refused, ok: good.ok, problems: bad.problems }));
          });`,
        resolveDir: fileURLToPath(new URL(".", import.meta.url)),
        loader: "ts",
      },
      bundle: true,
      format: "esm",
      platform: "node",
      outfile,
      logLevel: "error",
    });
    const output = execFileSync(execPath, ["--disallow-code-generation-from-strings", outfile], {
      input: JSON.stringify(duneDocument()),
      encoding: "utf8",
    });
    expect(JSON.parse(output)).toMatchObject({
      refused: true,
      ok: true,
      problems: [{ pointer: "/hypotheses/0/predictions/1/expected", found: "the unknown name q" }],
    });
  } finally {
    rmSync(folder, { recursive: true });
  }
});
