import { randomBytes } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import { sealKeyOf } from "@weighhouse/store/seal-key";
import { declarations, hum, opening, system } from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";
import { listDeliveries, MOST_TRIES, queueTest } from "@weighhouse/store/webhook-deliveries";
import { createWebhook, listWebhooks, switchOnWebhook } from "@weighhouse/store/webhooks";
import { runScorer } from "./run-scorer";
import type { RunningScorer } from "./run-scorer";
import { scoreCampaign } from "./score-campaign";
import { hasDigest, isSigned, WebhookReceiver } from "./testing/webhook-receiver";
import type { Received } from "./testing/webhook-receiver";
import { webhookTask } from "./webhook-task";

const rival = {
  kind: "hypothesis.registered" as const,
  payload: {
    key: "loose-grains",
    title: "Loose grains slide",
    team: "grain-size",
    predictions: [
      { measurand: "pitch-dry", expected: 120, tolerance: { family: "normal", sd: 4 } },
    ],
  },
};
const entries = [...declarations, rival];
const webhooks = { reach: "private" as const, origin: "https://house.example" };

let database: TestDatabase;
let store: Store;
const receiver = new WebhookReceiver();

beforeAll(async () => {
  database = await createTestDatabase();
  const signer = signerFromPem(createPrivateKeyPem(), "house.example");
  const sealKey = sealKeyOf(randomBytes(32));
  store = await openStore({ url: database.url, signer, sealKey, connections: 6 });
  await receiver.up();
});
afterAll(async () => {
  await receiver.down();
  await store.close();
  await database.drop();
});
beforeEach(async () => {
  receiver.received.length = 0;
  receiver.status = 204;
  // What an earlier test left waiting is no business of this one.
  await store.sql`
    select graphile_worker.complete_jobs(array(select id from graphile_worker.jobs))`;
});

/** A campaign, scored, with a webhook that is told of everything. */
async function listening(campaign: string, wants: { movedBy?: number; turned?: boolean } = {}) {
  await openCampaign(store, { coordinator: null, campaign: opening(campaign), entries });
  await scoreCampaign(store, campaign);
  const { movedBy = 0.5, turned = true } = wants;
  const url = `${receiver.origin}/tell?of=${campaign}`;
  return createWebhook(store, { campaign, url, movedBy, turned, madeBy: "coordinator" });
}

const post = (campaign: string, id: string, value: number, more = {}) =>
  postMeasurements(store, { campaign, by: system, measurements: [hum(id, value, more)] });

async function logOf(campaign: string) {
  const [webhook] = await listWebhooks(store, campaign);
  return listDeliveries(store, { campaign, webhook: webhook!.id, limit: 10 });
}

async function until(condition: () => Promise<boolean> | boolean, what: string): Promise<void> {
  for (let tries = 0; tries < 400; tries += 1) {
    if (await condition()) return;
    await sleep(25);
  }
  throw new Error(`waited in vain: ${what}`);
}

async function withScorer(work: (scorer: RunningScorer) => Promise<void>): Promise<void> {
  const scorer = await runScorer(store, { webhooks });
  try {
    await work(scorer);
  } finally {
    await scorer.stop();
  }
}

const tryNow = () => store.sql`
  select graphile_worker.reschedule_jobs(array(select id from graphile_worker.jobs), now())`;

describe("a delivery", () => {
  it("says what moved and what turned, signed as RFC 9421 has it over a digest as RFC 9530 has it", async () => {
    const { webhook, secret } = await listening("dune");
    await withScorer(async () => {
      await post("dune", "a", 96);
      await until(() => receiver.received.length > 0, "the delivery");
      const [received] = receiver.received;
      const body = JSON.parse(received!.body) as Record<string, unknown>;
      expect(body).toMatchObject({
        format: "weighhouse-webhook/1",
        what: "standings",
        campaign: "dune",
        size: 8,
        moved: [
          {
            hypothesis: "loose-grains",
            log10BayesFactor: { from: expect.any(Number), to: expect.any(Number) },
          },
        ],
        turned: [
          {
            hypothesis: "resonant-layer",
            measurand: "pitch-dry",
            verdict: { from: "awaiting", to: "pass" },
          },
          {
            hypothesis: "loose-grains",
            measurand: "pitch-dry",
            verdict: { from: "awaiting", to: "fail" },
          },
        ],
        page: "https://house.example/campaigns/dune?size=8",
        standings: "https://house.example/api/v1/campaigns/dune/standings.json?size=8",
      });
      expect(hasDigest(received!)).toBe(true);
      expect(isSigned(received!, secret)).toBe(true);
      const input = String(received!.headers["signature-input"]);
      expect(input).toMatch(
        /^sig=\("@method" "@target-uri" "content-type" "content-digest"\);created=\d+;keyid="[0-9a-f-]+";alg="hmac-sha256"$/,
      );
      expect(input).toContain(webhook.id);
      const lie: Received = { ...received!, url: `${receiver.origin}/other` };
      expect(isSigned(lie, secret)).toBe(false);
      expect(isSigned(received!, `${secret.slice(1)}x`)).toBe(false);
      expect(hasDigest({ ...received!, body: received!.body.replace("pass", "fail") })).toBe(false);
    });
    const [delivered] = await logOf("dune");
    expect(delivered).toMatchObject({ tries: 1, lastStatus: 204, lastError: null });
    expect(delivered!.deliveredAt).not.toBeNull();
  });

  it("to a receiver that is down arrives once it is up, once", async () => {
    await listening("night");
    await receiver.down();
    await withScorer(async () => {
      await post("night", "a", 96);
      await until(async () => ((await logOf("night"))[0]?.tries ?? 0) > 0, "the first try");
    });
    expect((await logOf("night"))[0]).toMatchObject({
      deliveredAt: null,
      givenUpAt: null,
      lastStatus: null,
      lastError: expect.stringContaining("ECONNREFUSED"),
    });
    const [job] = await store.sql<{ waits: boolean }[]>`
      select run_at > now() as waits from graphile_worker.jobs where key like 'webhook:%'`;
    expect(job?.waits).toBe(true);
    await receiver.up();
    await tryNow();
    await withScorer(() =>
      until(async () => (await logOf("night"))[0]?.deliveredAt !== null, "the second try"),
    );
    expect(receiver.received).toHaveLength(1);
    const [delivered] = await logOf("night");
    expect(delivered).toMatchObject({ tries: 2, lastStatus: 204, lastError: null });
    expect(JSON.parse(receiver.received[0]!.body)).toMatchObject({ id: delivered!.id });
  });

  it("isn't led on by a redirect, nor kept by a server that never answers", async () => {
    await listening("mirage");
    await post("mirage", "a", 96);
    await scoreCampaign(store, "mirage");
    const [waiting] = await logOf("mirage");
    const payload = { campaign: "mirage", delivery: waiting!.id };
    receiver.status = 307;
    receiver.headers = { location: `${receiver.origin}/elsewhere` };
    await expect(webhookTask(store, payload, { reach: "private", last: false })).rejects.toThrow(
      "it answered 307, and redirects are not followed",
    );
    expect(receiver.received).toHaveLength(1);
    receiver.status = null;
    receiver.headers = {};
    await expect(
      webhookTask(store, payload, { reach: "private", last: false, timeoutMs: 100 }),
    ).rejects.toThrow("no answer within 0.1 s");
    expect((await logOf("mirage"))[0]).toMatchObject({ tries: 2, lastStatus: null });
  });

  it("goes to no address of this machine or its networks unless a setting lets it", async () => {
    await listening("inside");
    await post("inside", "a", 96);
    await scoreCampaign(store, "inside");
    const [waiting] = await logOf("inside");
    const payload = { campaign: "inside", delivery: waiting!.id };
    for (const [url, words] of [
      [`${receiver.origin}/tell`, "http is not allowed here"],
      ["https://127.0.0.1:1/", "127.0.0.1 is not an address that the whole internet reaches"],
      // A name that leads here is told by what it leads to.
      ["https://localhost:1/", "is not an address that the whole internet reaches"],
    ] as const) {
      await store.sql`update webhooks set url = ${url} where url like ${"%inside%"} or url like 'https://127%'`;
      await expect(webhookTask(store, payload, { reach: "public", last: false })).rejects.toThrow(
        words,
      );
      await store.sql`update webhooks set url = 'https://127.0.0.1/' where url = ${url}`;
    }
    expect(receiver.received).toHaveLength(0);
  });
});

describe("what is told", () => {
  it("is a turn of a verdict and a move once each, however many scorers there are", async () => {
    await listening("twice");
    await post("twice", "a", 96);
    await Promise.all([scoreCampaign(store, "twice"), scoreCampaign(store, "twice")]);
    await scoreCampaign(store, "twice");
    expect(await logOf("twice")).toHaveLength(1);
    await post("twice", "tiny", 96, { sd: 3000 });
    await scoreCampaign(store, "twice");
    expect(await logOf("twice")).toHaveLength(1);
  });

  it("is a move of many small steps as soon as it is large enough, from what was last told", async () => {
    await listening("drift", { movedBy: 1.5, turned: false });
    for (let step = 0; step < 12; step += 1) {
      await post("drift", `step-${step}`, 96, { sd: 12 });
      await scoreCampaign(store, "drift");
    }
    const bodies = await store.sql<{ body: string }[]>`
      select body from webhook_deliveries where body like '%"drift"%' order by queued_at`;
    type Move = { log10BayesFactor: { from: number; to: number } };
    const moves = bodies.map(({ body }) => (JSON.parse(body) as { moved: Move[] }).moved);
    expect(moves.length).toBeGreaterThan(1);
    expect(moves.length).toBeLessThan(6);
    let told = 0;
    for (const [{ log10BayesFactor }] of moves as [Move][]) {
      expect(log10BayesFactor.from).toBe(told);
      expect(Math.abs(log10BayesFactor.to - told)).toBeGreaterThan(1.5);
      told = log10BayesFactor.to;
    }
  });

  it("is nothing to a webhook that is off, and what moved meanwhile once it is on again", async () => {
    const { webhook } = await listening("silence");
    await store.sql`
      update webhooks set switched_off_at = now(), switched_off_why = 'a test'
      where id = ${webhook.id}`;
    await post("silence", "a", 96);
    await scoreCampaign(store, "silence");
    expect(await logOf("silence")).toEqual([]);
    await switchOnWebhook(store, { campaign: "silence", id: webhook.id });
    await post("silence", "tiny", 96, { sd: 3000 });
    await scoreCampaign(store, "silence");
    expect(await logOf("silence")).toHaveLength(1);
  });
});

describe("a webhook", () => {
  it("is switched off when a delivery failed at every try, and says why", async () => {
    const { webhook } = await listening("gone");
    await post("gone", "a", 96);
    await scoreCampaign(store, "gone");
    const [waiting] = await logOf("gone");
    const payload = { campaign: "gone", delivery: waiting!.id };
    receiver.status = 500;
    for (let tries = 1; tries < MOST_TRIES; tries += 1) {
      const trying = webhookTask(store, payload, { reach: "private", last: false });
      await expect(trying).rejects.toThrow("500");
    }
    expect((await listWebhooks(store, "gone"))[0]!.switchedOffAt).toBeNull();
    await webhookTask(store, payload, { reach: "private", last: true });
    const [off] = await listWebhooks(store, "gone");
    expect(off).toMatchObject({
      id: webhook.id,
      switchedOffWhy: "it answered 500, at every try of a delivery",
    });
    expect((await logOf("gone"))[0]).toMatchObject({ tries: MOST_TRIES, deliveredAt: null });
    await webhookTask(store, payload, { reach: "private", last: true });
    expect(receiver.received).toHaveLength(MOST_TRIES);
  });

  it("stays on when a test of it fails, which is tried once", async () => {
    const { webhook } = await listening("trial");
    receiver.status = 404;
    const body = (id: string) => ({ id, what: "test" });
    await queueTest(store, { campaign: "trial", webhook: webhook.id, body });
    await withScorer(() =>
      until(async () => (await logOf("trial"))[0]?.givenUpAt !== null, "the test"),
    );
    expect((await logOf("trial"))[0]).toMatchObject({ what: "test", tries: 1, lastStatus: 404 });
    expect((await listWebhooks(store, "trial"))[0]!.switchedOffAt).toBeNull();
    const left = await store.sql`select 1 from graphile_worker.jobs where key like 'webhook:%'`;
    expect(left).toHaveLength(0);
  });

  it("has its secret in the database only encrypted, for it alone", async () => {
    const { secret } = await listening("vault");
    const [row] = await store.sql<{ text: string; secret: Buffer }[]>`
      select w::text as text, secret from webhooks w where url like ${"%vault"}`;
    expect(row!.text).not.toContain(secret);
    expect(row!.secret.includes(Buffer.from(secret))).toBe(false);
    await post("vault", "a", 96);
    await scoreCampaign(store, "vault");
    await store.sql`
      update webhooks set secret = (select secret from webhooks where url like ${"%dune"})
      where url like ${"%vault"}`;
    const [waiting] = await logOf("vault");
    const payload = { campaign: "vault", delivery: waiting!.id };
    await expect(webhookTask(store, payload, { reach: "private", last: false })).rejects.toThrow(
      "doesn't open",
    );
    expect(receiver.received).toHaveLength(0);
  });
});

it("the receiver of these tests verifies RFC 9421's own example (appendix B.2.5)", () => {
  const secret = Buffer.from(
    "uzvJfB4u3N0Jy4T7NZ75MDVcr8zSTInedJtkgcu46YW4XByzNJjxBdtjUkdJPBtbmHhIDi6pcl8jsasjlTMtDQ==",
    "base64",
  );
  const message: Received = {
    method: "POST",
    url: "https://example.com/foo?param=Value&Pet=dog",
    headers: {
      date: "Tue, 20 Apr 2021 02:07:55 GMT",
      "content-type": "application/json",
      "signature-input":
        'sig-b25=("date" "@authority" "content-type");created=1618884473;keyid="test-shared-secret"',
      signature: "sig-b25=:pxcQw6G3AjtMBQjwo8XzkZf/bws5LelbaMk5rGIGtE8=:",
    },
    body: '{"hello": "world"}',
  };
  expect(isSigned(message, secret)).toBe(true);
  expect(isSigned({ ...message, url: "https://example.org/foo" }, secret)).toBe(false);
});
