import { build } from "esbuild";
import { fileURLToPath } from "node:url";
import { createContext, runInContext } from "node:vm";
import { expect, it } from "vitest";
import { archiveInput } from "./testing/marsh-campaign";
import type { VerifyReport } from "./checks/line";
import { writeArchive } from "./write";

const program = `
import { verifyArchive } from "./verify";
import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { scoreCampaign } from "@weighhouse/engine/score";
globalThis.report = verifyArchive(globalThis.archive, { hasher: nobleHasher, score: scoreCampaign });
`;

it("an archive is checked with a browser's globals alone, and where no text may run as code", async () => {
  const bundle = await build({
    stdin: { contents: program, resolveDir: fileURLToPath(new URL(".", import.meta.url)) },
    bundle: true,
    platform: "browser",
    format: "iife",
    write: false,
    logLevel: "silent",
  });
  const globals = { archive: writeArchive(archiveInput()), TextEncoder, TextDecoder, atob, btoa };
  // Bytes of this realm would be no Uint8Array of the other.
  const context = createContext(
    { ...globals, Uint8Array, ArrayBuffer, DataView },
    { codeGeneration: { strings: false, wasm: false } },
  );
  runInContext(bundle.outputFiles[0]?.text ?? "", context);
  const report = (context as unknown as { report: VerifyReport }).report;
  expect(report.lines.filter(({ outcome }) => outcome === "failed")).toEqual([]);
  expect(report.ok).toBe(true);
});
