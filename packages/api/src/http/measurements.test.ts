import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { answerHttp } from "../http";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { withdrawMeasurements } from "@weighhouse/desk/withdraw-measurements";
import {
  historySchema,
  postedLineSchema,
  postedSchema,
  previewLineSchema,
} from "./measurement-answers";

let server: TestServer;
let lagoon: Lagoon;
let number = 0;

beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
  const { key, member } = lagoon;
  await registerHypothesis(server.desk, member, { key, hypothesis: hypothesis("algae", 40) });
});
afterAll(() => server.close());

type Sent = {
  type?: string;
  accept?: string;
  actor?: Lagoon["member"] | null;
  headers?: Record<string, string>;
};

async function post(path: string, body: string | Uint8Array | object, sent: Sent = {}) {
  const { actor = lagoon.member, accept = "*/*" } = sent;
  const plain = typeof body === "string" || body instanceof Uint8Array;
  const headers = {
    "content-type": sent.type ?? (plain ? "application/x-ndjson" : "application/json"),
    accept,
    origin: ORIGIN,
    ...sent.headers,
  };
  const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`, {
    method: "POST",
    headers,
    body: plain ? (body as string) : JSON.stringify(body),
  });
  return answerHttp({ ...(await server.context()), actor }, request);
}

const lines = (...rows: object[]) => rows.map((row) => `${JSON.stringify(row)}\n`).join("");
async function linesOf(response: Response): Promise<Record<string, unknown>[]> {
  const text = await response.text();
  return text
    .trimEnd()
    .split("\n")
    .map((line) => JSON.parse(line) as Record<string, unknown>);
}
const fresh = () => `m-${(number += 1)}`;
const size = async () => (await readCampaign(server.desk, null, { key: lagoon.key })).size;

describe("posting", () => {
  const [one, two] = [fresh(), fresh()];
  const forms: [string, string, string | object][] = [
    ["one object", "application/json", reading("single", 41)],
    ["a list", "application/json", [reading(one, 41), reading(two, 42)]],
    ["lines", "application/x-ndjson", lines(reading("l1", 41), reading("l2", 42))],
    [
      "a CSV",
      "text/csv",
      "id,measurand,facility,time,value,error\nc1,new-moon,pier,2026-02-03T22:00:00Z,41,2\n",
    ],
  ];
  it.each(forms)("takes %s, and the same again as already there", async (_, type, body) => {
    const before = await size();
    const first = await post("measurements", body, { type });
    expect(first.status).toBe(201);
    const answer = postedSchema.parse(await first.json());
    expect(answer).toMatchObject({
      key: lagoon.key,
      alreadyThere: 0,
      entries: { from: before, to: before + 1 },
    });
    expect(answer.ids).toHaveLength(answer.posted);
    const again = postedSchema.parse(await (await post("measurements", body, { type })).json());
    expect(again).toMatchObject({ posted: 0, alreadyThere: answer.posted, entries: null });
    expect(await size()).toBe(before + 1);
  });

  it("takes correlations with a list, once", async () => {
    const [a, b] = [fresh(), fresh()];
    const measurements = [reading(a, 41), reading(b, 42)];
    const body = { measurements, correlations: [{ a, b, coefficient: 0.5 }] };
    expect((await post("measurements", body)).status).toBe(201);
    const { document } = await readCampaign(server.desk, null, { key: lagoon.key });
    expect(document.correlations).toContainEqual({ a, b, coefficient: 0.5 });
    const again = (await (await post("measurements", body)).json()) as object;
    expect(again).toMatchObject({ posted: 0, alreadyThere: 3 });
  });

  it("refuses correlations that can't be so together, and enters nothing", async () => {
    const ids = [fresh(), fresh(), fresh()] as const;
    const [a, b, c] = ids;
    const correlations = [
      { a, b, coefficient: 0.9 },
      { a: b, b: c, coefficient: 0.9 },
      { a, b: c, coefficient: -0.9 },
    ];
    const before = await size();
    const measurements = ids.map((id) => reading(id, 41));
    const response = await post("measurements", { measurements, correlations });
    expect(response.status).toBe(422);
    expect(await response.json()).toMatchObject({
      problems: [{ code: "not-positive-definite" }],
    });
    expect(await size()).toBe(before);
  });

  it("fills what rows leave open from the query, and finds their measurand", async () => {
    const id = fresh();
    const { measurand: _, facility: __, ...row } = reading(id, 41);
    const response = await post(
      "measurements?facility=pier&batch=night-1&measurand=full-moon",
      lines(row),
    );
    expect(response.status).toBe(201);
    const { document } = await readCampaign(server.desk, null, { key: lagoon.key });
    expect(document.measurements.find((one) => one.id === id)).toMatchObject({
      facility: "pier",
      batch: "night-1",
      measurand: "full-moon",
      team: "algae",
    });
    const open = await post("measurements", lines({ ...row, id: fresh(), observable: "glow" }));
    expect(await open.json()).toMatchObject({
      problems: [
        {
          found: expect.stringMatching(
            /several measurands .*new-moon; full-moon \(line 1, column measurand\)/,
          ) as string,
        },
      ],
    });
  });

  it("gives rows without an id one, and says which", async () => {
    const answer = (await (await post("measurements", reading(null, 47))).json()) as object;
    expect(answer).toMatchObject({ ids: [expect.stringMatching(/^pier:.*:[0-9a-f]{12}$/)] });
  });

  it("tells how far it is by lines where that is asked for", async () => {
    const accept = "application/x-ndjson";
    const response = await post("measurements", lines(reading(fresh(), 41)), { accept });
    const told = await linesOf(response);
    for (const line of told) postedLineSchema.parse(line);
    expect(told.at(-1)).toMatchObject({ done: { posted: 1 } });
    const refused = await post("measurements", lines(reading(fresh(), 41), { value: "x" }), {
      accept,
    });
    const last = refused.ok ? (await linesOf(refused)).at(-1)?.["problem"] : await refused.json();
    expect(last).toMatchObject({ status: 422, code: "invalid" });
  });

  it("refuses what it can't read, all of it at once, where it is", async () => {
    const before = await size();
    const rows = [reading(fresh(), 41), { ...reading(fresh(), 41), sd: -1 }, 7];
    const refusals = await Promise.all([
      post("measurements", rows),
      post("measurements", { measurements: rows }),
      post("measurements", `${lines(reading(fresh(), 41))}{"sd":1\nnot JSON\n`),
    ]);
    const problems = await Promise.all(
      refusals.map(async (one) => {
        const { problems } = (await one.json()) as {
          problems: { pointer: string; found: string }[];
        };
        return problems.map(({ pointer, found }) => (pointer === "" ? found : pointer));
      }),
    );
    expect(refusals.map(({ status }) => status)).toEqual([422, 422, 422]);
    expect(problems).toEqual([
      ["/1/sd", "/2"],
      ["/measurements/1/sd", "/measurements/2"],
      [expect.stringMatching(/\(line 2\)$/), expect.stringMatching(/"n" at column 1 \(line 3\)$/)],
    ]);
    expect(await size()).toBe(before);
  });

  it("refuses another content under an id, and others' rights", async () => {
    const id = fresh();
    await post("measurements", reading(id, 41));
    const conflict = await post("measurements", reading(id, 43));
    expect(conflict.status).toBe(409);
    expect((await post("measurements", reading(fresh(), 1), { actor: null })).status).toBe(401);
    const { reader } = lagoon;
    expect((await post("measurements", reading(fresh(), 1), { actor: reader })).status).toBe(403);
    const theirs = reading(fresh(), 1, { team: "minerals" });
    expect((await post("measurements", theirs)).status).toBe(422);
  });

  it("of a stream with an Idempotency-Key is answered again without entering anything", async () => {
    const headers = { "idempotency-key": '"posting-1"' };
    const body = lines(reading(fresh(), 41));
    const first = await post("measurements", body, { headers });
    const again = await post("measurements", body, { headers });
    expect(again.headers.get("idempotency-replayed")).toBe("true");
    expect(await again.json()).toEqual(await first.json());
    const other = await post("measurements", lines(reading(fresh(), 41)), { headers });
    expect(other.status).toBe(422);
  });
});

describe("the preview", () => {
  it("tells each row's fate and measurand, then what would change, and enters nothing", async () => {
    const before = await size();
    const there = fresh();
    await post("measurements", reading(there, 41));
    const rows = [
      reading(there, 41),
      reading(there, 44),
      reading(fresh(), 41),
      { ...reading(fresh(), 41), value: "high" },
    ];
    const told = await linesOf(await post("measurements/preview", lines(...rows)));
    for (const line of told) previewLineSchema.parse(line);
    const fates = told.flatMap(({ row }) => (row === undefined ? [] : [row as { fate: string }]));
    expect(fates.map(({ fate }) => fate)).toEqual(["alreadyThere", "refused", "new", "refused"]);
    expect(fates[2]).toMatchObject({ line: 3, measurand: "new-moon" });
    expect(told.at(-1)).toMatchObject({
      preview: { counts: { new: 1, alreadyThere: 1, conflict: 0, refused: 2 }, postable: false },
    });
    expect(await size()).toBe(before + 1);
  });

  it("leaves out good rows where only faults are asked for", async () => {
    const rows = lines(reading(fresh(), 70), { ...reading(fresh(), 41), sd: 0 });
    const told = await linesOf(await post("measurements/preview?rows=faults", rows));
    const fates = told.flatMap(({ row }) => (row === undefined ? [] : [row]));
    expect(fates).toMatchObject([{ line: 2, problems: [{ column: "sd" }] }]);
  });

  it("says which verdicts would turn", async () => {
    const rows = lines(...Array.from({ length: 5 }, () => reading(fresh(), 90, { sd: 0.5 })));
    const told = await linesOf(await post("measurements/preview", rows));
    expect(told.at(-1)).toMatchObject({
      preview: { postable: true, changes: { verdicts: [{ hypothesis: "algae", after: "fail" }] } },
    });
  });
});

describe("reading", () => {
  async function get(path: string, headers: Record<string, string> = {}) {
    const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`, { headers });
    return answerHttp(await server.context(), request);
  }
  const ofAll = async () =>
    (await readCampaign(server.desk, null, { key: lagoon.key })).document.measurements;

  it("gives all of them by page, in the document's order and as of one size", async () => {
    const ids: unknown[] = [];
    let path: string | undefined = "measurements?limit=4";
    while (path !== undefined) {
      const response = await get(path);
      const page = await linesOf(response);
      expect(page.length).toBeLessThanOrEqual(4);
      ids.push(...page.map(({ id }) => id));
      // What comes meanwhile is on none of these pages.
      if (ids.length === 4) await post("measurements", reading(fresh(), 41));
      path = /^<.*\/(measurements\?.*)>; rel="next"$/.exec(response.headers.get("link") ?? "")?.[1];
    }
    const there = await ofAll();
    expect(ids).toEqual(there.slice(0, -1).map(({ id }) => id));
  });

  it.each(["ndjson", "csv", "ecsv", "votable"])(
    "gives %s by name and by Accept, and not again to who has it",
    async (format) => {
      const first = await get(`measurements?format=${format}`);
      const accept = first.headers.get("content-type")!.split(";")[0]!;
      const byAccept = await get("measurements", { accept });
      const text = await byAccept.text();
      expect(text).toBe(await first.text());
      for (const { id } of await ofAll()) expect(text).toContain(id);
      const headers = { accept, "if-none-match": byAccept.headers.get("etag")! };
      expect((await get("measurements", headers)).status).toBe(304);
      const preview = await post("measurements/preview", text, { type: accept });
      const told = (await linesOf(preview)).at(-1)!["preview"];
      expect(told).toMatchObject({ problems: [], counts: { new: 0 } });
    },
  );

  it("gives lines that can be posted again", async () => {
    const body = await (await get("measurements")).text();
    const posted = await post("measurements", body);
    const all = await ofAll();
    expect(await posted.json()).toMatchObject({ posted: 0, alreadyThere: all.length });
  });

  it("gives a measurement with what became of it", async () => {
    const id = fresh();
    await post("measurements", reading(id, 41));
    const { key, member } = lagoon;
    const selection = { by: "ids" as const, ids: [id] };
    await withdrawMeasurements(server.desk, member, { key, selection, reason: "a stray lamp" });
    const history = historySchema.parse(await (await get(`measurements/${id}`)).json());
    expect(history.versions).toMatchObject([
      { kind: "measurements.posted", team: "algae", withdrawn: false },
      { kind: "measurements.withdrawn", reason: "a stray lamp", withdrawn: true },
    ]);
    expect((await get("measurements/nobody")).status).toBe(404);
  });
});
