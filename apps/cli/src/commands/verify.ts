import { stampedHeads } from "@weighhouse/audit/stamped-heads";
import { verifyArchive } from "@weighhouse/audit/verify";
import { scoreCampaign } from "@weighhouse/engine/score";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { readBytes } from "../document-file";
import { Refusal, wrongUsage } from "../refusal";
import { harmless, terminalOf, wrap, type Terminal } from "../terminal";

type VerifyReport = ReturnType<typeof verifyArchive>;
type CheckLine = VerifyReport["lines"][number];

export const verify = defineCommand({
  meta: { name: "verify", description: descriptions.verify },
  args: {
    archive: { type: "positional", description: "Audit trail (ZIP)", required: true },
    key: {
      type: "string",
      description: "File with a public key that you hold (name+hash+base64, a line each)",
      valueHint: "FILE",
    },
    head: {
      type: "string",
      description: "File with a signed tree head that you kept",
      valueHint: "NOTE",
    },
    "tsa-ca": {
      type: "string",
      description: "File with certificates (PEM) of time-stamp authorities that you trust",
      valueHint: "FILE",
    },
    json: { type: "boolean", description: "Write the report as JSON" },
  },
  async run({ args }) {
    const archive = await readBytes(args.archive);
    const authorities = args["tsa-ca"];
    const trusted = authorities === undefined ? undefined : await readText(authorities);
    const report = verifyArchive(archive, {
      ...(await tokenVerifier(archive, trusted)),
      hasher: nodeHasher,
      score: scoreCampaign,
      trustedKeys: args.key === undefined ? [] : linesOf(await readText(args.key)),
      ...(args.head === undefined ? {} : { trustedHead: await readText(args.head) }),
    });
    process.stdout.write(
      args.json ? `${JSON.stringify(report, null, 2)}\n` : reportText(report, args.archive),
    );
    if (!report.ok) throw new Refusal(1, failures(report));
  },
});

/** What verifies certificates is loaded only where there are any. */
async function tokenVerifier(archive: Uint8Array, trusted: string | undefined) {
  const stamped = stampedHeads(archive);
  if (stamped.length === 0 && trusted === undefined) return {};
  const { certificatesOf } = await import("@weighhouse/timestamps/verify-token");
  const { verifyTokens } = await import("@weighhouse/timestamps/verify-tokens");
  try {
    if (trusted !== undefined) certificatesOf(trusted);
  } catch (error) {
    throw wrongUsage(`--tsa-ca: ${error instanceof Error ? error.message : String(error)}`);
  }
  return { verifyToken: await verifyTokens(stamped, { sha256: nodeHasher, trusted }) };
}

function failures(report: VerifyReport): string[] {
  return report.lines
    .filter(({ outcome }) => outcome === "failed")
    .map(({ check, detail }) => `${check}: ${harmless(detail)}`);
}

function reportText(report: VerifyReport, path: string): string {
  const terminal = terminalOf(process.stdout);
  const widest = Math.max(...report.lines.map(({ check }) => check.length));
  const lines = report.lines.map((line) => lineText(line, widest, terminal));
  const verdict = report.ok ? "Nothing failed" : "Failed";
  return `${[...lines, terminal.style("bold", `${verdict}: ${path}`)].join("\n")}\n`;
}

function lineText(
  { check, outcome, detail }: CheckLine,
  widest: number,
  terminal: Terminal,
): string {
  const style = { ok: "green", failed: "red", "not present": "dim" } as const;
  const column = outcome.padEnd("not present".length);
  const text = `${column}  ${check.padEnd(widest)}  ${harmless(detail)}`;
  const indent = " ".repeat(
    Math.min(column.length + widest + 4, Math.floor(terminal.proseColumns / 2)),
  );
  const wrapped = wrap(text.replaceAll(/ {2,}/g, keepSpaces), terminal.proseColumns, indent);
  return wrapped.replaceAll("\u00a0", " ").replace(column, terminal.style(style[outcome], column));
}

/** Padding must outlive the wrapping at spaces. */
function keepSpaces(spaces: string): string {
  return `${"\u00a0".repeat(spaces.length - 1)} `;
}

async function readText(path: string): Promise<string> {
  return new TextDecoder().decode(await readBytes(path));
}

function linesOf(text: string): string[] {
  return text.split("\n").flatMap((line) => (line.trim() === "" ? [] : [line.trim()]));
}
