import { createHash } from "node:crypto";
import { bodyOf, campaignAddress, refused, send, unreachable } from "../server";
import type { Refusal } from "../refusal";
import { jsonLines } from "./json-lines";
import { sendPatiently } from "./patient-send";
import type { Progress } from "../progress";
import type { Part } from "./parts";

/** Rows on their way in: kept by the server for a day, under an id that the same rows lead to again. */
export type Upload = {
  campaign: string;
  id: string;
  defaults: RowDefaults;
  /** The SHA-256 of each part that is there. */
  parts: Map<number, string>;
};

/** What rows without the field have. */
export type RowDefaults = Partial<Record<"facility" | "team" | "measurand" | "batch", string>>;

const JSON_TYPE = "application/json";
const LINES = "application/x-ndjson";

/**
 * Opens an upload for rows of a digest, or finds the one that an earlier run left behind: the server
 * answers the same asking (Idempotency-Key) with the same upload for a day.
 */
export async function openUpload(
  campaign: string,
  rows: { digest: string; defaults: RowDefaults },
): Promise<Upload> {
  const { digest, defaults } = rows;
  const query = String(new URLSearchParams(defaults));
  const named = createHash("sha256").update(`${digest}?${query}`).digest("hex").slice(0, 40);
  const address = campaignAddress(campaign, "uploads");
  for (let round = 1; ; round += 1) {
    const headers = { accept: JSON_TYPE, "idempotency-key": `"post-${named}-${round}"` };
    const opened = await send(address, { method: "POST", headers });
    const { upload } = await readAnswer<{ upload: string }>(address, opened);
    const there = campaignAddress(campaign, `uploads/${upload}`);
    const response = await sendPatiently(there, { headers: { accept: JSON_TYPE } });
    if (response.status === 404) {
      // An earlier run posted it.
      await response.body?.cancel();
      continue;
    }
    const { parts } = await readAnswer<{ parts: { part: number; sha256: string }[] }>(
      there,
      response,
    );
    const known = new Map(parts.map(({ part, sha256 }) => [part, sha256]));
    return { campaign, id: upload, defaults, parts: known };
  }
}

/** Sends the parts that aren't there yet; a part that is there with other bytes is replaced. */
export async function sendPart(upload: Upload, part: Part): Promise<"sent" | "there"> {
  if (upload.parts.get(part.number) === part.sha256) return "there";
  const { campaign, id, defaults } = upload;
  const address = campaignAddress(campaign, `uploads/${id}/parts/${part.number}`);
  address.search = String(new URLSearchParams(defaults));
  const digest = Buffer.from(part.sha256, "hex").toString("base64");
  const headers = {
    accept: JSON_TYPE,
    "content-type": LINES,
    "content-digest": `sha-256=:${digest}:`,
  };
  const body = new Uint8Array(part.bytes);
  const response = await sendPatiently(address, { method: "PUT", headers, body });
  if (!response.ok) throw await refusalOf(address, response);
  await response.body?.cancel();
  return "sent";
}

export type Finish = {
  what: "post" | "preview?rows=faults";
  progress: Progress;
  /** The rows that were sent. */
  rows: number;
  /** Told each line of the answer that is no progress. */
  told?: (line: Record<string, unknown>) => void;
};

/** Has what was sent entered, or tried; the answer's last line is given. */
export async function finishUpload(
  upload: Upload,
  { what, progress, rows, told = () => {} }: Finish,
): Promise<{ last: Record<string, unknown>; address: URL }> {
  const address = campaignAddress(upload.campaign, `uploads/${upload.id}/${what}`);
  const response = await sendPatiently(address, { method: "POST", headers: { accept: LINES } });
  if (!response.ok) {
    const body = await bodyOf(address, response);
    const problem = problemOf(body);
    if (problem === null) throw refused(address, response, body);
    return { last: { problem }, address };
  }
  let last: Record<string, unknown> = {};
  try {
    for await (const line of jsonLines(response)) {
      last = line;
      if ("progress" in line) progress.report((line["progress"] as { rows: number }).rows, rows);
      else told(line);
    }
  } catch (error) {
    throw unreachable(address, error);
  } finally {
    progress.end();
  }
  return { last, address };
}

async function readAnswer<T>(address: URL, response: Response): Promise<T> {
  const body = await bodyOf(address, response);
  if (!response.ok) throw refused(address, response, body);
  return JSON.parse(new TextDecoder().decode(body)) as T;
}

async function refusalOf(address: URL, response: Response): Promise<Refusal> {
  return refused(address, response, await bodyOf(address, response));
}

function problemOf(body: Uint8Array): Record<string, unknown> | null {
  try {
    const value: unknown = JSON.parse(new TextDecoder().decode(body));
    return typeof value === "object" && value !== null ? (value as Record<string, unknown>) : null;
  } catch {
    return null;
  }
}
