import { rename, rm, writeFile } from "node:fs/promises";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { Refusal, wrongUsage } from "../refusal";
import { harmless } from "../terminal";

const DEFAULT_URL = "http://localhost:3000";

export const exportTrail = defineCommand({
  meta: { name: "export", description: descriptions.export },
  args: {
    campaign: {
      type: "string",
      description: "Key of the campaign",
      valueHint: "KEY",
      required: true,
    },
    output: {
      type: "string",
      alias: "o",
      description: "File to write",
      valueHint: "AUDIT.zip",
      required: true,
    },
  },
  async run({ args }) {
    if (!/^[a-z0-9][a-z0-9-]{0,63}$/.test(args.campaign)) {
      throw wrongUsage(
        `found --campaign ${args.campaign}; allowed a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit`,
      );
    }
    const bytes = await download(args.campaign);
    await writeWhole(args.output, bytes);
    process.stderr.write(`Saved ${args.output} (${bytes.length} bytes)\n`);
  },
});

async function download(campaign: string): Promise<Uint8Array> {
  const address = addressOf(campaign);
  const key = process.env.WEIGHHOUSE_API_KEY;
  let response: Response;
  let body: Uint8Array;
  try {
    response = await fetch(address, {
      headers: { accept: "application/zip", ...(key ? { authorization: `Bearer ${key}` } : {}) },
      redirect: "error",
    });
    body = new Uint8Array(await response.arrayBuffer());
  } catch (error) {
    throw new Refusal(3, [`${address.origin} could not be reached: ${reasonOf(error)}`], {
      cause: error,
    });
  }
  if (!response.ok) throw refused(address, response, body);
  if (body[0] !== 0x50 || body[1] !== 0x4b) {
    throw new Refusal(3, [`${address.href} answered with something that is no ZIP archive`]);
  }
  return body;
}

function addressOf(campaign: string): URL {
  const base = process.env.WEIGHHOUSE_URL || DEFAULT_URL;
  if (!/^https?:\/\//.test(base) || !URL.canParse(base)) {
    throw wrongUsage(`found WEIGHHOUSE_URL ${base}; allowed an http or https address`);
  }
  return new URL(`${base.replace(/\/+$/, "")}/api/v1/campaigns/${campaign}/audit.zip`);
}

const STATUS_WORDS: Record<number, string> = {
  401: "it asks for an API key (WEIGHHOUSE_API_KEY), or refuses the one given",
  403: "not allowed",
  404: "no such campaign, or none that may be read without an account",
  429: "too many requests; try again later",
};

function refused(address: URL, response: Response, body: Uint8Array): Refusal {
  const { status, statusText } = response;
  const why = [STATUS_WORDS[status] ?? statusText, detailOf(body)].filter(Boolean).join("; ");
  return new Refusal(3, [`${address.href} answered ${status}: ${why}`]);
}

/** The server's own words, where it answers with problem details (RFC 9457). */
function detailOf(body: Uint8Array): string | null {
  try {
    const answer: unknown = JSON.parse(new TextDecoder().decode(body.subarray(0, 10_000)));
    const detail = (answer as { detail?: unknown } | null)?.detail;
    return typeof detail === "string" ? harmless(detail) : null;
  } catch {
    return null;
  }
}

function reasonOf(error: unknown): string {
  const cause = error instanceof Error ? (error.cause ?? error) : error;
  if (cause instanceof AggregateError && cause.errors.length > 0) return reasonOf(cause.errors[0]);
  return cause instanceof Error ? cause.message : String(cause);
}

/** Never half a file: written beside, then renamed. */
async function writeWhole(path: string, bytes: Uint8Array): Promise<void> {
  const draft = `${path}.${process.pid}.part`;
  try {
    await writeFile(draft, bytes);
    await rename(draft, path);
  } catch (error) {
    await rm(draft, { force: true });
    const why = (error as NodeJS.ErrnoException).code ?? String(error);
    throw wrongUsage(`found no way to write ${path} (${why}); allowed the path of a file to make`);
  }
}
