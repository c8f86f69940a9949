import { spawn } from "node:child_process";
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, expect, it } from "vitest";
import { appendEntries } from "@weighhouse/store/append";
import { readEntry } from "@weighhouse/store/read-ledger";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { lostHead } from "@weighhouse/store/testing/lost-head";
import { rewriteLedger } from "@weighhouse/store/testing/rewrite-ledger";
import { declarations, opening } from "@weighhouse/store/testing/sample-campaign";
import { answerHttp } from "./http";
import { openTestServer } from "./testing/test-server";
import type { TestServer } from "./testing/test-server";

const command = fileURLToPath(new URL("../../../apps/cli/bin/weighhouse.mjs", import.meta.url));
const keep = mkdtempSync(path.join(tmpdir(), "weighhouse-watch-"));
let server: TestServer;
const http = createServer((request, response) => {
  void (async () => {
    const { port } = http.address() as AddressInfo;
    const asked = new Request(`http://127.0.0.1:${port}${request.url}`);
    const answer = await answerHttp({ ...(await server.context()), actor: null }, asked);
    response.writeHead(answer.status, Object.fromEntries(answer.headers));
    response.end(Buffer.from(await answer.arrayBuffer()));
  })();
});

beforeAll(async () => {
  server = await openTestServer();
  const campaign = opening("dune");
  await openCampaign(server.desk.store, { coordinator: null, campaign, entries: declarations });
  await new Promise<void>((resolve) => http.listen(0, "127.0.0.1", resolve));
});
afterAll(async () => {
  http.close();
  await server.close();
  rmSync(keep, { recursive: true, force: true });
});

function watch(...more: string[]) {
  const { port } = http.address() as AddressInfo;
  return run(`http://127.0.0.1:${port}/campaigns/dune`, "--keep", keep, ...more);
}

/** Runs the command as its users do, in a process of its own. */
async function run(...words: string[]) {
  const child = spawn(process.execPath, [command, "watch", ...words]);
  let [out, err] = ["", ""];
  child.stdout.setEncoding("utf8").on("data", (text: string) => (out += text));
  child.stderr.setEncoding("utf8").on("data", (text: string) => (err += text));
  const code = await new Promise<number | null>((resolve) => child.on("close", resolve));
  return { code, out, err };
}

const join = (key: string) =>
  appendEntries(server.desk.store, {
    campaign: "dune",
    by: { system: true },
    entries: [{ kind: "team.joined", payload: { key, title: key } }],
  });

it("keeps the first head, and each later one that a proof shows to go on from it", async () => {
  expect(await watch("--once")).toMatchObject({
    code: 0,
    err: "",
    out: expect.stringMatching(/dune: 6 entries; this/) as string,
  });
  expect((await watch("--once")).out).toContain("6 entries, nothing new; nothing before was");
  await join("wind");
  await join("moisture");
  expect((await watch("--once")).out).toContain("8 entries, 2 more; nothing before was touched");
  expect(readdirSync(keep)).toEqual(["0000000000000006.note", "0000000000000008.note"]);
});

it("ends with 1 and says where, once the ledger is rewritten and signed anew by its own key", async () => {
  await join("after");
  const { store } = server.desk;
  const as = { adminUrl: server.adminUrl, signer: store.signer! };
  const payload = { key: "moisture", title: "Never heard of it" };
  await rewriteLedger(store, as, { campaign: "dune", seq: 7, payload });
  expect((await readEntry(store, { campaign: "dune", seq: 7 })).payload).toContain("Never heard");
  const { code, err } = await watch("--every", "1");
  expect(code).toBe(1);
  expect(err).toMatch(/dune: the ledger was rewritten: its first 8 entries are not those/);
  expect(err).toContain("the first change is among the entries 6 to 7");
  // What was watched stays, to be compared with by others.
  expect(readdirSync(keep)).toEqual(["0000000000000006.note", "0000000000000008.note"]);
});

it("proves one entry up to a head that goes on from the one kept", async () => {
  const { port } = http.address() as AddressInfo;
  const page = `http://127.0.0.1:${port}/campaigns/dune`;
  const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-prove-"));
  const prove = (entry: string) => run(page, "--keep", folder, "--entry", entry);
  const { code, out } = await prove("3");
  expect(code).toBe(0);
  expect(out).toContain("dune: entry 3 is proved");
  expect(out.match(/^ok {2}/gm)).toHaveLength(5);
  expect(await prove("99")).toMatchObject({
    code: 3,
    err: expect.stringContaining("404") as string,
  });
  expect((await prove("last")).err).toContain("allowed an entry's number, from 0");
  rmSync(folder, { recursive: true });
});

it("ends with 1 once where the ledger itself says that it was restored, and watches on", async () => {
  const { store } = server.desk;
  const campaign = { ...opening("erg"), title: "Another dune" };
  await openCampaign(store, { coordinator: null, campaign, entries: declarations });
  const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-restored-"));
  const { port } = http.address() as AddressInfo;
  const page = `http://127.0.0.1:${port}/campaigns/erg`;
  const once = () => run(page, "--keep", folder, "--once");
  await once();
  // What was signed of 8 entries, two of which the restore took away.
  const lost = await lostHead(store, "erg", 8);
  writeFileSync(path.join(folder, "0000000000000008.note"), lost.note);
  expect((await once()).err).toContain("the ledger was rewritten: it has 6 entries");
  const payload = { before: 8, root: lost.root, after: 6, reason: "a disk failed" };
  await appendEntries(store, {
    campaign: "erg",
    by: { system: true },
    entries: [{ kind: "ledger.restored", payload }],
  });
  const { code, err } = await once();
  expect(code).toBe(1);
  expect(err).toContain("as its entry 6 says (a disk failed)");
  expect(err).toContain("lost are the entries 6 to 7, or more");
  expect(await once()).toMatchObject({
    code: 0,
    out: expect.stringContaining("7 entries") as string,
  });
  expect(readdirSync(folder).sort()).toEqual([
    "0000000000000006.note",
    "0000000000000007.note",
    "0000000000000008.note.lost",
  ]);
  rmSync(folder, { recursive: true });
});

it("ends with 2 where two places are named, or no time to wait", async () => {
  const asked = await watch("--once", "--campaign", "dune");
  expect([asked.code, asked.err]).toEqual([
    2,
    "found neither or both of an address and --campaign; allowed is one of them\n",
  ]);
  expect((await watch("--every", "0")).err).toContain("allowed 1 to 86400 whole seconds");
});
