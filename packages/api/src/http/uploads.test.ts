import { createHash } from "node:crypto";
import { afterAll, beforeAll, expect, it } from "vitest";
import { declareMeasurand, declareObservable } from "@weighhouse/desk/declare";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp } from "../http";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { previewLineSchema } from "./measurement-answers";
import { uploadSchema } from "./uploads";

let server: TestServer;
let lagoon: Lagoon;

beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
});
afterAll(() => server.close());

type Sent = { body?: string; actor?: Lagoon["member"]; headers?: Record<string, string> };

async function ask(method: string, path: string, sent: Sent = {}): Promise<Response> {
  const { body, actor = lagoon.member, headers } = sent;
  const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`, {
    method,
    headers: {
      origin: ORIGIN,
      ...(body === undefined ? {} : { "content-type": "application/x-ndjson" }),
      ...headers,
    },
    ...(body === undefined ? {} : { body }),
  });
  return answerHttp({ ...(await server.context()), actor }, request);
}

async function open(): Promise<string> {
  const response = await ask("POST", "uploads");
  expect(response.status).toBe(201);
  return uploadSchema.parse(await response.json()).upload;
}

const digest = (text: string, form: "hex" | "base64") =>
  createHash("sha256").update(text).digest(form);
const lines = (from: number, count: number, more: object = {}) =>
  Array.from({ length: count }, (_, i) => {
    return `${JSON.stringify(reading(`u-${from + i}`, 41, { ...more }))}\n`;
  }).join("");
const size = async () => (await readCampaign(server.desk, null, { key: lagoon.key })).size;

it("parts sent in any order, some again, are entered in their order in one transaction", async () => {
  const before = await size();
  const path = `uploads/${await open()}`;
  const [one, two] = [lines(0, 30), lines(30, 20)];
  const stated = { "content-digest": `sha-256=:${digest(two, "base64")}:` };
  expect((await ask("PUT", `${path}/parts/2`, { body: two, headers: stated })).status).toBe(200);
  await ask("PUT", `${path}/parts/1`, { body: lines(900, 5) });
  const part = { part: 1, sha256: digest(one, "hex"), rows: 30, bytes: one.length };
  for (let again = 0; again < 2; again += 1) {
    expect(await (await ask("PUT", `${path}/parts/1`, { body: one })).json()).toEqual(part);
  }
  const there = uploadSchema.parse(await (await ask("GET", path)).json());
  expect(there.parts).toMatchObject([part, { part: 2, rows: 20 }]);
  expect(await size()).toBe(before);
  const posted = await ask("POST", `${path}/post`);
  expect(posted.status).toBe(201);
  expect(await posted.json()).toMatchObject({ posted: 50, alreadyThere: 0 });
  const { document } = await readCampaign(server.desk, null, { key: lagoon.key });
  const ids = Array.from({ length: 50 }, (_, i) => `u-${i}`);
  expect(document.measurements.map(({ id }) => id)).toEqual(ids);
  expect((await ask("GET", path)).status).toBe(404);
});

it("a part whose bytes aren't those stated is refused, and the upload goes on", async () => {
  const path = `uploads/${await open()}`;
  const headers = { "content-digest": `sha-256=:${digest("other", "base64")}:` };
  const refused = await ask("PUT", `${path}/parts/1`, { body: lines(100, 3), headers });
  expect(refused.status).toBe(400);
  expect(await (await ask("GET", path)).json()).toMatchObject({ parts: [] });
});

it("rows at fault keep all of it out, are told by part and line, and can be put right", async () => {
  const before = await size();
  const path = `uploads/${await open()}`;
  await ask("PUT", `${path}/parts/1`, { body: lines(200, 3) });
  await ask("PUT", `${path}/parts/2`, { body: lines(202, 2) });
  await ask("PUT", `${path}/parts/3`, { body: lines(210, 1, { sd: -1 }) });
  const told = (await (await ask("POST", `${path}/preview?rows=faults`)).text())
    .trimEnd()
    .split("\n")
    .map((line) => previewLineSchema.parse(JSON.parse(line)));
  expect(told.filter((line) => "row" in line)).toMatchObject([
    { row: { part: 2, line: 1, fate: "refused", problems: [{ column: "id" }] } },
    { row: { part: 3, line: 1, fate: "refused", problems: [{ column: "sd" }] } },
  ]);
  expect(told.at(-1)).toMatchObject({
    preview: { postable: false, counts: { new: 4, refused: 2 } },
  });
  const refused = await ask("POST", `${path}/post`);
  expect(await refused.json()).toMatchObject({
    status: 422,
    problems: [
      { found: "u-202, which part 1, line 3 has already (part 2, line 1, column id)" },
      { found: "-1 (part 3, line 1, column sd)" },
    ],
  });
  expect(await size()).toBe(before);
  await ask("PUT", `${path}/parts/2`, { body: lines(204, 2) });
  await ask("PUT", `${path}/parts/3`, { body: lines(210, 1) });
  expect(await (await ask("POST", `${path}/post`)).json()).toMatchObject({ posted: 6 });
});

it("reports in two parts that no truth can give together keep it out", async () => {
  const { key, coordinator } = lagoon;
  const observable = { key: "lit", title: "Lit", scale: "event" as const };
  await declareObservable(server.desk, coordinator, { key, observable });
  const measurand = { key: "lit-ever", observable: "lit" };
  await declareMeasurand(server.desk, coordinator, { key, measurand });
  const report = { measurand: "lit-ever", value: undefined, sd: undefined };
  const path = `uploads/${await open()}`;
  await ask("PUT", `${path}/parts/1`, { body: lines(300, 1, { ...report, occurred: true }) });
  await ask("PUT", `${path}/parts/2`, { body: lines(301, 1, { ...report, occurred: false }) });
  const refused = await ask("POST", `${path}/post`);
  expect(await refused.json()).toMatchObject({
    status: 422,
    problems: [{ found: expect.stringMatching(/no truth of lit-ever/) as string }],
  });
});

it("is its member's alone, and can be given up", async () => {
  const path = `uploads/${await open()}`;
  const { rival } = lagoon;
  expect((await ask("GET", path, { actor: rival })).status).toBe(404);
  const put = await ask("PUT", `${path}/parts/1`, { body: lines(400, 1), actor: rival });
  expect(put.status).toBe(404);
  expect((await ask("POST", `${path}/post`)).status).toBe(422);
  expect((await ask("DELETE", path)).status).toBe(204);
  expect((await ask("GET", path)).status).toBe(404);
  expect((await ask("GET", "uploads/none")).status).toBe(422);
});
