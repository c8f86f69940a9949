import { afterAll, beforeAll, expect, it } from "vitest";
import { takeTurn } from "@weighhouse/store/request-rates";
import { openLagoon } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp } from "../http";
import { keyOf } from "../testing/serve-api";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { networkOf } from "./count-request";
import { rateLimit } from "./rate-classes";

let server: TestServer;
let lagoon: Lagoon;
beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
});
afterAll(() => server.close());

async function read(headers: Record<string, string>, path = "ledger/head") {
  const url = `${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`;
  return answerHttp(await server.context(), new Request(url, { headers }));
}

it("lets through what the table says, then refuses with when to come again; others go on", async () => {
  const address = { "x-forwarded-for": "198.51.100.7" };
  const { requests } = rateLimit("heavy", "address");
  for (let i = 1; i <= requests; i++) {
    const answer = await read(address, "standings.json");
    expect(answer.status).toBe(200);
    expect(answer.headers.get("ratelimit-policy")).toBe(`"heavy";q=${requests};w=60`);
    const [, left] = /^"heavy";r=(\d+);t=\d+$/.exec(answer.headers.get("ratelimit") ?? "") ?? [];
    // While these are asked, a turn or two come back.
    expect(Number(left)).toBeGreaterThanOrEqual(requests - i);
    expect(Number(left)).toBeLessThanOrEqual(requests - 1);
  }
  let refused = await read(address, "standings.json");
  for (let i = 0; refused.status === 200 && i < requests; i++) {
    refused = await read(address, "standings.json");
  }
  expect(refused.status).toBe(429);
  expect(refused.headers.get("content-type")).toBe("application/problem+json");
  const seconds = Number(refused.headers.get("retry-after"));
  expect(seconds).toBeGreaterThanOrEqual(1);
  expect(seconds).toBeLessThanOrEqual(Math.ceil(60 / requests));
  expect(await refused.json()).toMatchObject({ status: 429, code: "too-many-requests" });
  // Another class, another address and a key are counted apart.
  expect((await read(address)).status).toBe(200);
  const elsewhere = { "x-forwarded-for": "198.51.100.8" };
  expect((await read(elsewhere, "standings.json")).status).toBe(200);
  const key = await keyOf(server, lagoon.key, { maker: lagoon.member, scopes: ["read"] });
  expect((await read({ ...address, ...key }, "standings.json")).status).toBe(200);
});

it("counts refused keys by address, until even that is refused", async () => {
  const { requests } = rateLimit("bad-key", "address");
  const headers = { "x-forwarded-for": "198.51.100.9", authorization: "Bearer guess" };
  const seen: number[] = [];
  for (let i = 0; i < requests + 3; i++) seen.push((await read(headers)).status);
  expect(seen.slice(0, requests)).toEqual(Array(requests).fill(401));
  expect(seen.at(-1)).toBe(429);
});

it("takes the address that the nearest proxy saw, not one that the client made up", async () => {
  const headers = { "x-forwarded-for": "203.0.113.1, 198.51.100.9", authorization: "Bearer x" };
  expect((await read(headers)).status).toBe(429);
});

it("lets exactly so many of a crowd through that asks at once, and one more after its time", async () => {
  const { store } = server.desk;
  const limit = { requests: 5, seconds: 2 };
  const turns = await Promise.all(
    Array.from({ length: 20 }, () => takeTurn(store, "crowd", limit)),
  );
  const allowed = turns.filter((turn) => turn.allowed);
  expect(allowed.length).toBeGreaterThanOrEqual(5);
  // A turn comes back every 0.4 s: the crowd's statements take less than two of them.
  expect(allowed.length).toBeLessThanOrEqual(7);
  expect(turns.find((turn) => !turn.allowed)?.secondsToWait).toBe(1);
  await new Promise((resolve) => setTimeout(resolve, 500));
  expect((await takeTurn(store, "crowd", limit)).allowed).toBe(true);
});

it.each([
  ["192.0.2.1", "192.0.2.1"],
  ["::ffff:192.0.2.1", "192.0.2.1"],
  ["2001:db8:0:12::1", "2001:db8:0:12::/64"],
  ["2001:0db8:0000:0012:aaaa:bbbb:cccc:dddd", "2001:db8:0:12::/64"],
  ["::1", "0:0:0:0::/64"],
  ["fe80::1%eth0", "fe80:0:0:0::/64"],
  ["", "unknown"],
  ["nonsense", "unknown"],
])("the address %s is counted as %s", (address, network) => {
  expect(networkOf(address)).toBe(network);
});
