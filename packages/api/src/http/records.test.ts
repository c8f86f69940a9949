import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { answerHttp } from "../http";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { appendedSchema } from "./ledger-answers";
import { correctedSchema, correctionsPreviewSchema, withdrawalPreviewSchema } from "./records";

let server: TestServer;
let lagoon: Lagoon;

beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
  const { key, member } = lagoon;
  await registerHypothesis(server.desk, member, { key, hypothesis: hypothesis("algae", 40) });
  const drafts = ["a", "b", "c", "d"].map((id) => reading(id, 41));
  await postMeasurements(server.desk, member, { key, source: { from: "drafts", drafts } });
});
afterAll(() => server.close());

async function post(path: string, body: object, actor: Lagoon["member"] | null = lagoon.member) {
  const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`, {
    method: "POST",
    headers: { "content-type": "application/json", origin: ORIGIN },
    body: JSON.stringify(body),
  });
  return answerHttp({ ...(await server.context()), actor }, request);
}

const there = async () =>
  (await readCampaign(server.desk, null, { key: lagoon.key })).document.measurements;

describe("corrections", () => {
  const corrections = [
    { measurement: { ...reading("a", 43), id: "a" }, reason: "reduced anew" },
    { measurement: { ...reading("b", 41), id: "b" }, reason: "reduced anew" },
  ];

  it("are tried, and entered with a reason", async () => {
    const tried = await post("corrections/preview", { corrections });
    expect(tried.status).toBe(200);
    const preview = correctionsPreviewSchema.parse(await tried.json());
    expect(preview.corrections[0]!.fields).toEqual([{ field: "value", before: 41, after: 43 }]);
    const done = await post("corrections", { corrections });
    expect(done.status).toBe(201);
    expect(correctedSchema.parse(await done.json())).toMatchObject({
      corrected: ["a"],
      unchanged: ["b"],
    });
    expect((await there())[0]).toMatchObject({ id: "a", value: 43 });
  });

  it("name each fault at its place in the body", async () => {
    const refused = await post("corrections", { corrections: [{ ...corrections[0], reason: "" }] });
    expect(refused.status).toBe(422);
    expect(await refused.json()).toMatchObject({
      problems: [{ pointer: "/corrections/0/reason" }],
    });
    const strange = await post("corrections", { corrections, why: "x" });
    expect(await strange.json()).toMatchObject({
      problems: [{ found: expect.stringContaining("why") }],
    });
    expect((await post("corrections", { corrections }, null)).status).toBe(401);
    expect((await post("corrections", { corrections }, lagoon.rival)).status).toBe(403);
  });
});

describe("withdrawals and set-asides", () => {
  it("are tried, and entered with a reason", async () => {
    const selection = { by: "ids", ids: ["c"] };
    const tried = await post("withdrawals/preview", { selection });
    expect(tried.status).toBe(200);
    expect(withdrawalPreviewSchema.parse(await tried.json()).ids).toEqual(["c"]);
    const withdrawn = await post("withdrawals", { selection, reason: "a torch" });
    expect(withdrawn.status).toBe(201);
    appendedSchema.parse(await withdrawn.json());
    const aside = await post("set-asides", { id: "d", reason: "moonrise" });
    expect(aside.status).toBe(201);
    appendedSchema.parse(await aside.json());
    expect((await there()).map(({ id, setAside }) => [id, setAside?.reason ?? null])).toEqual([
      ["a", null],
      ["b", null],
      ["d", "moonrise"],
    ]);
    expect((await post("set-asides", { id: "d", reason: "again" })).status).toBe(409);
    expect((await post("set-asides", { id: "c", reason: "gone" })).status).toBe(404);
  });
});
