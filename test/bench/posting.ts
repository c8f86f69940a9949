/**
 * Posting of many measurements: a stream of NDJSON from a file through reading, judging, staging,
 * ledger and projection, against raw COPY of the rows that it makes into a table like theirs, in the
 * same database and run. Meanwhile another process posts single measurements to the same campaign.
 * Run by `npm run bench`; other numbers of rows as arguments (1000000 takes some minutes).
 */
import { fork } from "node:child_process";
import { createReadStream, createWriteStream, mkdtempSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { pipeline } from "node:stream/promises";
import { Readable } from "node:stream";
import { fileURLToPath } from "node:url";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { postRows } from "@weighhouse/desk/post-rows";
import { inText } from "@weighhouse/desk/row-source";
import { linePieces } from "@weighhouse/desk/stage-lines";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { enrolKey } from "@weighhouse/store/signing-keys";
import postgres from "postgres";
import { onBenchStore } from "./bench-store";
import { line } from "./timing";

const [first, ...others] = process.argv.slice(2);
if (first === "poster") await postSingly();
else await measure(first === undefined ? [100_000] : [first, ...others].map(Number));

async function measure(sizes: number[]): Promise<void> {
  const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-posting-"));
  try {
    await onBenchStore(async (store) => {
      console.log("\nPosting a stream of NDJSON against raw COPY of the same rows, rows a second");
      const columns = ["rows", "posted", "COPY, indexed", "ratio", "COPY, bare", "ratio"];
      const more = ["seconds", "own CPU", "locked", "others wait (ms)", "grew by (MB)"];
      console.log([...columns, ...more].map((name) => name.padStart(16)).join(" "));
      for (const rows of sizes) await measureOne(store, path.join(folder, "rows"), rows);
    });
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

async function measureOne(store: Store, file: string, rows: number): Promise<void> {
  await pipeline(Readable.from(invented(rows)), createWriteStream(file));
  const lagoon = await openLagoon(houseOf(store), { key: `lagoon-${rows}` });
  const { key, member } = lagoon;
  const desk = { store };
  await registerHypothesis(desk, member, { key, hypothesis: hypothesis("algae", 40) });
  const poster = await startPoster(store, lagoon);
  const memory = watchMemory();
  const cpu = process.cpuUsage();
  let enteredAt = 0;
  const start = performance.now();
  const posted = await postRows(desk, member, {
    key,
    source: () => ({
      pieces: linePieces(createReadStream(file, { highWaterMark: 65_536 })),
      columns: [],
      problems: [],
      place: inText(""),
    }),
    tell: ({ stage }) => {
      if (stage === "enter") enteredAt = performance.now();
    },
  });
  const end = performance.now();
  const { user, system } = process.cpuUsage(cpu);
  const grownBy = memory.stop();
  const waits = await poster.stop();
  if (posted.posted !== rows) throw new Error(`posted ${posted.posted} of ${rows}`);
  const indexed = await copySeconds(store, file, { key, including: "all" });
  const bare = await copySeconds(store, file, { key, including: "defaults" });
  const seconds = (end - start) / 1000;
  const perSecond = (of: number) => Math.round(rows / of);
  console.log(
    line([
      [rows, 16],
      [perSecond(seconds), 16],
      [perSecond(indexed), 16],
      [(indexed / seconds).toFixed(2), 16],
      [perSecond(bare), 16],
      [(bare / seconds).toFixed(2), 16],
      [seconds.toFixed(1), 16],
      [((user + system) / 1e6).toFixed(1), 16],
      [((end - enteredAt) / 1000).toFixed(1), 16],
      [`${Math.round(median(waits))}, ${Math.round(Math.max(...waits))} at most`, 16],
      [Math.round(grownBy / 1e6), 16],
    ]),
  );
}

/** Lines such as a survey's pipeline writes. */
function* invented(rows: number): Generator<string> {
  const begin = Date.UTC(2030, 0, 1);
  for (let i = 0; i < rows; i += 1) {
    const measurement = reading(`n-${String(i).padStart(7, "0")}`, 40 + ((i * 7919) % 1000) / 100, {
      measurand: i % 3 === 0 ? "full-moon" : "new-moon",
      observedAt: new Date(begin + i * 1000).toISOString(),
      batch: `night-${Math.floor(i / 5000)}`,
      unit: "nW",
      source: "https://archive.example/frames",
    });
    yield `${JSON.stringify(measurement)}\n`;
  }
}

function houseOf(store: Store): Parameters<typeof openLagoon>[0] {
  return {
    desk: { store },
    async person(name: string) {
      const userId = `${name} ${Date.now()}`;
      const email = `${userId.toLowerCase().replaceAll(" ", ".")}@people.example`;
      await store.sql`insert into "user" (id, name, email) values (${userId}, ${name}, ${email})`;
      return { userId, name, email };
    },
  } as Parameters<typeof openLagoon>[0];
}

/** The rows as they stand in the projection, out and in again by COPY alone. */
async function copySeconds(
  store: Store,
  file: string,
  { key, including }: { key: string; including: "all" | "defaults" },
): Promise<number> {
  const admin = new URL(process.env["WEIGHHOUSE_TEST_DATABASE_ADMIN_URL"]!);
  admin.pathname = new URL(store.url).pathname;
  const text = `${file}.copy`;
  await copyOut(admin.href, key, text);
  const sql = postgres(admin.href, { max: 1, onnotice: () => {} });
  try {
    await sql.unsafe(`create table raw_rows (like measurements including ${including})`);
    await sql.unsafe("checkpoint");
    if (statSync(text).size === 0) throw new Error("no rows were copied out");
    const start = performance.now();
    const into = await sql`copy raw_rows from stdin`.writable();
    await pipeline(createReadStream(text, { highWaterMark: 1_048_576 }), into);
    return (performance.now() - start) / 1000;
  } finally {
    await sql.unsafe("drop table if exists raw_rows");
    await sql.end();
  }
}

/** On a connection of its own: one that was read from as a stream may stay paused. */
async function copyOut(url: string, key: string, text: string): Promise<void> {
  const sql = postgres(url, { max: 1, onnotice: () => {} });
  const out = await sql`copy (select m.* from measurements m join campaigns c
    on c.id = m.campaign_id where c.key = ${sql.unsafe(`'${key}'`)}) to stdout`.readable();
  await pipeline(out, createWriteStream(text));
  await sql.end({ timeout: 0 });
}

function watchMemory(): { stop(): number } {
  const begun = process.memoryUsage().rss;
  let most = begun;
  const timer = setInterval(() => (most = Math.max(most, process.memoryUsage().rss)), 50);
  return {
    stop() {
      clearInterval(timer);
      return most - begun;
    },
  };
}

/** Another process, since one that judges a million rows would keep its own postings waiting. */
async function startPoster(
  store: Store,
  { key, member }: Lagoon,
): Promise<{ stop(): Promise<number[]> }> {
  const pem = createPrivateKeyPem();
  const next = signerFromPem(pem, "house.example");
  await enrolKey(store.sql, { listed: store.signer!, next });
  const child = fork(fileURLToPath(import.meta.url), [
    "poster",
    JSON.stringify({ url: store.url, key, member, pem }),
  ]);
  await new Promise((resolve) => child.once("message", resolve));
  return {
    stop: () =>
      new Promise<number[]>((resolve) => {
        child.once("message", (waits) => resolve(waits as number[]));
        child.send("stop");
      }),
  };
}

async function postSingly(): Promise<void> {
  const { url, key, member, pem } = JSON.parse(process.argv[3]!) as {
    url: string;
    key: string;
    member: Lagoon["member"];
    pem: string;
  };
  const signer = signerFromPem(pem, "house.example");
  const store = await openStore({ url, signer, connections: 2 });
  const waits: number[] = [];
  const asked = { stop: false };
  process.on("message", () => (asked.stop = true));
  for (let i = 0; !asked.stop; i += 1) {
    const start = performance.now();
    const source = { from: "drafts" as const, drafts: [reading(`other-${i}`, 41)] };
    await postMeasurements({ store }, member, { key, source });
    waits.push(performance.now() - start);
    if (i === 0) process.send!("ready");
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  process.send!(waits.slice(1));
  await store.close();
  process.disconnect();
}

function median(numbers: number[]): number {
  return numbers.toSorted((a, b) => a - b)[Math.floor(numbers.length / 2)] ?? 0;
}
