import { ask, campaignAddress, refused } from "../server";
import { Refusal } from "../refusal";
import type { ExitCode } from "../refusal";
import { fatesInWords, postedLine, postingReport } from "../print/posting-report";
import { progressOf } from "../progress";
import { terminalOf } from "../terminal";
import { LineTooLong, PART_BYTES, partsOf } from "./parts";
import { openRowFile, problemLines } from "./row-file";
import type { RowFile } from "./row-file";
import { faultsOfLine } from "./server-preview";
import type { LineFinder, Preview } from "./server-preview";
import type { ServerContext } from "./table-rows";
import { finishUpload, openUpload, sendPart } from "./upload";
import type { RowDefaults, Upload } from "./upload";

export type PostOptions = {
  campaign: string;
  defaults: RowDefaults;
  /** By column name the field that it fills. */
  chosen: Record<string, string>;
  dryRun: boolean;
  json: boolean;
};

/** Sends a file's measurements, what of them isn't there yet, and has them entered, or tried. */
export async function postFile(path: string, options: PostOptions): Promise<ExitCode> {
  const { campaign, defaults, chosen, dryRun } = options;
  const file = await openRowFile(path, {
    defaults,
    chosen,
    context: (layout) => readContext(campaign, layout),
  });
  if (!dryRun) for (const note of file.notes) process.stderr.write(`${note}\n`);
  const upload = await openUpload(campaign, { digest: file.digest, defaults });
  const sent = await sendParts(path, file, upload);
  if (dryRun) return tryUpload(path, options, { file, sent });
  const { rows } = sent;
  const entering = { what: "post", progress: progressOf("Entered"), rows } as const;
  const { last, address } = await finishUpload(upload, entering);
  if ("done" in last) {
    const done = last["done"] as Parameters<typeof postedLine>[1];
    process.stdout.write(options.json ? `${JSON.stringify(done)}\n` : postedLine(path, done));
    return 0;
  }
  throw await refusalOf(path, { sent, address, problem: last["problem"] });
}

async function readContext(campaign: string, layout: string): Promise<ServerContext> {
  const address = campaignAddress(campaign, `tables.json?layout=${layout}`);
  const answer = await ask(address, { accept: "application/json" });
  return JSON.parse(new TextDecoder().decode(answer)) as ServerContext;
}

/** What was sent, and where a row of one of its parts stands in the file. */
type SentRows = { upload: Upload; rows: number; lineOf: LineFinder };

async function sendParts(path: string, file: RowFile, upload: Upload): Promise<SentRows> {
  const progress = progressOf(`Sent of ${path}, in bytes`);
  const firstLines: number[] = [];
  let [done, there, rows] = [0, 0, 0];
  try {
    for (const part of partsOf(file.chunks())) {
      firstLines[part.number] = part.firstLine;
      if ((await sendPart(upload, part)) === "there") there += 1;
      done += part.bytes.length;
      rows += part.lines;
      progress.report(done, file.bytes);
    }
  } catch (error) {
    if (!(error instanceof LineTooLong)) throw error;
    throw new Refusal(1, [
      `${path}:${error.line}: found a line of more than ${PART_BYTES} bytes; allowed a measurement a line`,
    ]);
  } finally {
    progress.end();
  }
  if (there > 0) {
    const parts = there === 1 ? "1 of its parts was" : `${there} of its parts were`;
    process.stderr.write(`Went on where an earlier run broke off: ${parts} there\n`);
  }
  const lineOf: LineFinder = (part, line) => file.lineOf((firstLines[part] ?? 1) + line - 1);
  return { upload, rows, lineOf };
}

async function tryUpload(
  path: string,
  { json }: PostOptions,
  { file, sent }: { file: RowFile; sent: SentRows },
): Promise<ExitCode> {
  const { preview, faults } = await previewOf(sent);
  if (json) {
    const rows = faults.map((fault) => ({ file: path, ...fault }));
    process.stdout.write(`${JSON.stringify({ ...preview, rows, columns: file.matches })}\n`);
  } else {
    const { matches, notes } = file;
    process.stdout.write(
      postingReport(preview, { path, matches, notes }, terminalOf(process.stdout)),
    );
  }
  const lines = problemLines(path, [...preview.problems, ...faults]);
  if (lines.length > 0) throw new Refusal(1, lines);
  return 0;
}

async function previewOf({ upload, rows, lineOf }: SentRows) {
  const faults: ReturnType<typeof faultsOfLine> = [];
  const { last, address } = await finishUpload(upload, {
    what: "preview?rows=faults",
    progress: progressOf("Judged"),
    rows,
    told: (line) => faults.push(...faultsOfLine(line, lineOf)),
  });
  if (!("preview" in last)) throw problemRefusal(address, last["problem"]);
  return { preview: last["preview"] as Preview, faults };
}

/** Rows at fault are told one by one, where they stand in the file; all else in the server's words. */
async function refusalOf(
  path: string,
  refusal: { sent: SentRows; address: URL; problem: unknown },
): Promise<Refusal> {
  const { sent, address, problem } = refusal;
  const { code } = problem as { code?: string };
  if (code !== "invalid" && code !== "conflict") return problemRefusal(address, problem);
  const { preview, faults } = await previewOf(sent);
  const lines = problemLines(path, [...preview.problems, ...faults]);
  if (lines.length === 0) return problemRefusal(address, problem);
  return new Refusal(1, [...lines, `Nothing was entered: ${fatesInWords(preview)}.`]);
}

function problemRefusal(address: URL, problem: unknown): Refusal {
  const { status = 500, title = "" } = problem as { status?: number; title?: string };
  const response = { status, statusText: title } as Response;
  return refused(address, response, new TextEncoder().encode(JSON.stringify(problem)));
}
