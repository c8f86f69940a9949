import { SaxesParser } from "saxes";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { makeRemark } from "@weighhouse/desk/make-remark";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp } from "../http";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { atomText, nameBasedId } from "./atom";

const strange = `<b>"it's" & ]]> \ufffe \r\u202e 潟湖 🌊</b>`;
let server: TestServer;
let open: Lagoon;
let shut: Lagoon;
/** Entries of the public campaign. */
let size: number;

beforeAll(async () => {
  server = await openTestServer();
  open = await openLagoon(server);
  shut = await openLagoon(server, { key: "shut-lagoon", visibility: "members" });
  const { key, member } = open;
  const glowing = { ...hypothesis("algae", 40), title: "Algae & <light>" };
  await registerHypothesis(server.desk, member, { key, hypothesis: glowing });
  const drafts = [1, 2, 3, 4].map((number) => reading(`n${number}`, 40 + number));
  await postMeasurements(server.desk, member, { key, source: { from: "drafts", drafts } });
  const remark = { on: 1, kind: "question" as const };
  for (let index = 0; index < 50; index += 1) {
    const { to } = await makeRemark(server.desk, member, {
      key,
      ...remark,
      text: index === 49 ? strange : `Why, ${index}?`,
    });
    size = to;
  }
});
afterAll(() => server.close());

async function get(
  path: string,
  options: { actor?: Lagoon["member"]; headers?: Record<string, string> } = {},
) {
  const context = { ...(await server.context()), actor: options.actor ?? null };
  const url = path.startsWith("http") ? path : `${ORIGIN}/api/v1/campaigns/${path}`;
  return answerHttp(context, new Request(url, { headers: options.headers ?? {} }));
}

type Element = {
  name: string;
  attributes: Record<string, string>;
  text: string;
  within: Element[];
};

/** Parsed by saxes, which refuses what isn't well-formed (XML 1.0 with namespaces). */
function parsed(xml: string): Element {
  const root: Element = { name: "", attributes: {}, text: "", within: [] };
  const path = [root];
  const parser = new SaxesParser({ xmlns: true });
  parser.on("error", (error) => {
    throw error;
  });
  parser.on("opentag", ({ local, uri, attributes }) => {
    expect(uri).toBe("http://www.w3.org/2005/Atom");
    const values = Object.entries(attributes).map(([name, { value }]) => [name, value]);
    const next = { name: local, attributes: Object.fromEntries(values), text: "", within: [] };
    path.at(-1)!.within.push(next);
    path.push(next);
  });
  parser.on("text", (text) => (path.at(-1)!.text += text));
  parser.on("closetag", () => path.pop());
  parser.write(xml).close();
  return root.within[0]!;
}

const all = (element: Element, name: string) => element.within.filter((one) => one.name === name);
const textOf = (element: Element, name: string) => all(element, name)[0]?.text;
const link = (element: Element, rel: string) =>
  all(element, "link").find(({ attributes }) => attributes["rel"] === rel)?.attributes["href"];

describe("the feed of a public campaign's ledger", () => {
  it("has what RFC 4287 asks of a feed and of each entry, the newest first", async () => {
    const response = await get(`${open.key}/feed.atom`);
    expect(response.headers.get("content-type")).toBe("application/atom+xml; charset=utf-8");
    const feed = parsed(await response.text());
    expect(feed.name).toBe("feed");
    for (const one of [feed, ...all(feed, "entry")]) {
      for (const name of ["id", "title", "updated", "author"])
        expect(all(one, name)).toHaveLength(1);
      expect(textOf(one, "id")).toMatch(/^urn:uuid:[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/);
      expect(Date.parse(textOf(one, "updated")!)).not.toBeNaN();
    }
    const ids = all(feed, "entry").map((entry) => textOf(entry, "id"));
    expect(new Set(ids).size).toBe(50);
    const [newest] = all(feed, "entry");
    expect(link(newest!, "alternate")).toBe(`${ORIGIN}/campaigns/${open.key}/ledger/${size - 1}`);
    expect(textOf(feed, "updated")).toBe(textOf(newest!, "updated"));
    expect(link(feed, "self")).toBe(`${ORIGIN}/api/v1/campaigns/${open.key}/feed.atom`);
  });

  it("says in plain words what was done, and for which team, naming nobody", async () => {
    const text = await (await get(`${open.key}/feed.atom?to=${size - 50}`)).text();
    const entries = all(parsed(text), "entry");
    expect(entries.map((entry) => textOf(entry, "title")).slice(0, 4)).toEqual([
      "Measurements posted: n1, n2, n3 and 1 more",
      "Hypothesis registered: Algae & <light>",
      "Team joined: Minerals",
      "Team joined: Algae",
    ]);
    expect(textOf(all(entries[0]!, "author")[0]!, "name")).toBe("algae");
    expect(text).not.toContain(open.member.name);
  });

  it("stays well-formed whatever a text holds", async () => {
    const feed = parsed(await (await get(`${open.key}/feed.atom`)).text());
    const [newest] = all(feed, "entry");
    expect(textOf(newest!, "title")).toBe("Remark: question on entry 1");
    // What XML can't hold is replaced; all else comes through.
    expect(textOf(newest!, "summary")).toBe(`<b>"it's" & ]]> \ufffd \r\u202e 潟湖 🌊</b>`);
  });

  it("is paged without gap or repetition, each entry under the same id on every page (RFC 5005)", async () => {
    const seen: string[] = [];
    let address: string | undefined = link(
      parsed(await (await get(`${open.key}/feed.atom`)).text()),
      "first",
    );
    let last = "";
    while (address !== undefined) {
      const feed = parsed(await (await get(address)).text());
      seen.push(...all(feed, "entry").map((entry) => textOf(entry, "id")!));
      last = address;
      if (seen.length > 50) expect(link(feed, "previous")).toBe(link(feed, "first"));
      expect(new URL(link(feed, "last")!).searchParams.get("to")).toBe(String(size - 50));
      address = link(feed, "next");
    }
    expect(seen).toHaveLength(size);
    expect(new Set(seen).size).toBe(size);
    expect(new URL(last).searchParams.get("to")).toBe(String(size - 50));
  });

  it("isn't sent again to who has it", async () => {
    const etag = (await get(`${open.key}/feed.atom`)).headers.get("etag")!;
    const again = await get(`${open.key}/feed.atom`, { headers: { "if-none-match": etag } });
    expect([again.status, await again.text()]).toEqual([304, ""]);
  });
});

it("of a campaign of members only they read", async () => {
  expect((await get(`${shut.key}/feed.atom`)).status).toBe(404);
  expect((await get(`${shut.key}/feed.atom`, { actor: shut.stranger })).status).toBe(404);
  expect((await get(`${shut.key}/feed.atom`, { actor: shut.reader })).status).toBe(200);
});

it("names of version 5 are made as RFC 9562 makes them (its appendix A.4)", () => {
  const dns = "6ba7b810-9dad-11d1-80b4-00c04fd430c8";
  expect(nameBasedId("www.example.com", dns)).toBe("2ed6657d-e927-568b-95e1-2665a8aea6a2");
});

it("a text of every code unit there is gives well-formed XML", () => {
  const units = Array.from({ length: 0x10000 }, (_, unit) => String.fromCharCode(unit));
  const about = { id: "urn:x", updated: "2044-01-01T00:00:00Z", author: units.join(" ") };
  const feed = parsed(atomText({ ...about, title: units.join(""), links: [], entries: [] }));
  expect(textOf(feed, "title")).toContain("<=>");
});
