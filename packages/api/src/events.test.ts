import { afterAll, beforeAll, expect, it } from "vitest";
import { appendEntries } from "@weighhouse/store/append";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { EVENTS_PER_SECOND } from "./event-hub";
import { readStream, serveHttp } from "./testing/http-server";
import { openTestServer } from "./testing/test-server";
import type { TestServer } from "./testing/test-server";

let server: TestServer;
let http: Awaited<ReturnType<typeof serveHttp>>;

beforeAll(async () => {
  server = await openTestServer();
  http = await serveHttp(server);
  for (const [key, visibility] of [
    ["open-marsh", "public"],
    ["shut-marsh", "members"],
    ["busy-marsh", "public"],
    ["last-marsh", "public"],
  ] as const) {
    const campaign = { key, title: "Why the marsh booms", visibility };
    await openCampaign(server.desk.store, { coordinator: null, campaign });
  }
});
afterAll(async () => {
  await http.close();
  await server.close();
});

const declare = (campaign: string, facility: string) =>
  appendEntries(server.desk.store, {
    campaign,
    by: { system: true },
    entries: [{ kind: "facility.declared", payload: { key: facility } }],
  });

/** Follows a campaign; each tracked event comes as its id and its data. */
async function follow(key: string, lastEventId?: string) {
  const leaving = new AbortController();
  const input = JSON.stringify({ json: { key } });
  const response = await fetch(`${http.url}/events.watch?input=${encodeURIComponent(input)}`, {
    headers: {
      accept: "text/event-stream",
      ...(lastEventId === undefined ? {} : { "last-event-id": lastEventId }),
    },
    signal: leaving.signal,
  });
  const stream = readStream(response);
  return {
    response,
    async next() {
      for (;;) {
        const { value, done } = await stream.next();
        if (done) return null;
        if (value.id === null && value.event !== "serialized-error") continue;
        const data = JSON.parse(value.data) as { json: unknown };
        return { id: value.id, event: value.event, data: data.json, at: value.at };
      }
    },
    leave: () => leaving.abort(),
  };
}

it("who watches is told how it stands, then of an append within a second", async () => {
  const watched = await follow("open-marsh");
  const first = await watched.next();
  expect(first?.data).toEqual({ campaign: "open-marsh", size: 1, what: "appended" });
  const before = performance.now();
  await declare("open-marsh", "boardwalk");
  const second = await watched.next();
  expect(second?.data).toEqual({ campaign: "open-marsh", size: 2, what: "appended" });
  expect(second!.at - before).toBeLessThan(1000);
  watched.leave();
});

it("who connects anew with the last event's id hears nothing twice, and nothing is lost", async () => {
  const watched = await follow("open-marsh");
  const last = await watched.next();
  watched.leave();
  await declare("open-marsh", "reed-bed");
  const again = await follow("open-marsh", last?.id ?? "");
  expect((await again.next())?.data).toMatchObject({ size: 3 });
  await declare("open-marsh", "sluice");
  expect((await again.next())?.data).toMatchObject({ size: 4 });
  again.leave();
});

it("a campaign of members isn't told of to others", async () => {
  const watched = await follow("shut-marsh");
  const told = await watched.next();
  expect(told?.event).toBe("serialized-error");
  expect(told?.data).toMatchObject({ data: { code: "NOT_FOUND" } });
  expect(await watched.next()).toBeNull();
});

it("a burst is told at most five times a second, the newest last", async () => {
  const watched = await follow("busy-marsh");
  await watched.next();
  const until = performance.now() + 1500;
  let size = 1;
  const heard: { at: number; size: number }[] = [];
  const hearing = (async () => {
    while (heard.at(-1)?.size !== size || performance.now() < until) {
      const event = await watched.next();
      heard.push({ at: event!.at, size: (event!.data as { size: number }).size });
    }
  })();
  while (performance.now() < until) {
    await declare("busy-marsh", `hide-${size}`);
    size += 1;
  }
  await hearing;
  expect(size).toBeGreaterThan(heard.length);
  const seconds = (heard.at(-1)!.at - heard[0]!.at) / 1000;
  // One more than five a second: both ends of the span are counted.
  expect(heard.length).toBeLessThanOrEqual(EVENTS_PER_SECOND * seconds + 1.5);
  expect(heard.map((event) => event.size)).toEqual(
    heard.map((event) => event.size).toSorted((a, b) => a - b),
  );
  watched.leave();
});

// The last test of this file: nothing can be watched in this process afterwards.
it("when the process is told to stop, open streams end", async () => {
  const { closing } = await import("./closing");
  const watched = await follow("last-marsh");
  await watched.next();
  closing.abort();
  expect(await watched.next()).toBeNull();
});
