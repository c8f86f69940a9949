import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { base64, hex } from "@weighhouse/ledger/bytes";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import { checkProgram } from "./check-program";
import { WRITER_VERSION } from "./layout";
import { archiveInput, marshTransactions } from "./testing/marsh-campaign";
import { sealedTransactions } from "./testing/sealed-marsh";
import { detailOf, failures, verify } from "./testing/verify-marsh";
import { writeArchive } from "./write";
import { unpackFiles } from "./zip/read";

const input = archiveInput(sealedTransactions());
const filesOf = (archive: Uint8Array) => unpackFiles(archive);
const files = filesOf(writeArchive(input));
const text = (path: string, from = files) => new TextDecoder().decode(from.get(path));

it("check.py in archives is the one beside this test: `npm run check-program` brings it over", () => {
  expect(checkProgram).toBe(readFileSync(new URL("check.py", import.meta.url), "utf8"));
});

it("what readers read is written by this version of the writer: another word is another version", () => {
  const read = [...files].filter(([path]) =>
    /\.(md|tex|svg|py)$|^ro-crate-metadata\.json$/.test(path),
  );
  // The engine's version and the ledger's root stand in some of them, and are not the writer's.
  const root = base64(parseTreeHead(input.heads.at(-1) as string).root);
  const words = read.map(([path, bytes]) => {
    const said = new TextDecoder()
      .decode(bytes)
      .replaceAll(input.engine, "ENGINE")
      .replaceAll(root, "ROOT");
    return `${path}\n${path === "ro-crate-metadata.json" ? said.replaceAll(/"(sha256|contentSize)":"\w+"/g, "") : said}`;
  });
  const digest = hex(nodeHasher(new TextEncoder().encode(words.join("\n"))));
  expect([WRITER_VERSION, digest]).toEqual([
    "2",
    "a8fd25a8a03b26532a3064681dcc163efecceaf63c616be1c183b413dc4180e9",
  ]);
});

describe("methods.md counts in the entries", () => {
  it.each([
    ["predictions filed before observation", 5],
    ["predictions filed before posting", 2],
    ["predictions filed after data (not counted)", 1],
    ["predictions sealed", 1],
    ["sealed predictions revealed", 1],
    ["measurements ever posted", 6],
    ["measurements withdrawn", 1],
    ["corrections of measurements", 1],
    ["measurements set aside", 1],
  ])("%s", (what, count) => {
    expect(text("methods.md")).toContain(`| ${what} | ${count} |`);
  });

  it("and cites no method that no number comes from", () => {
    expect(text("methods.md")).toContain("JCGM 106:2012");
    expect(text("methods.md")).not.toContain("Barlow");
  });
});

/**
 * What RO-Crate 1.2 asks of every crate, from its published text: "Root Data Entity" and "Metadata
 * Descriptor" (https://www.researchobject.org/ro-crate/specification/1.2/root-data-entity.html).
 */
describe("ro-crate-metadata.json", () => {
  type Entity = { "@id": string; "@type": string; [name: string]: unknown };
  const crate = JSON.parse(text("ro-crate-metadata.json")) as {
    "@context": string;
    "@graph": Entity[];
  };
  const entity = (id: string) => crate["@graph"].find((one) => one["@id"] === id);

  it("has the context, a descriptor that conforms to 1.2, and a root that is a dated, licensed data set", () => {
    expect(crate["@context"]).toBe("https://w3id.org/ro/crate/1.2/context");
    expect(entity("ro-crate-metadata.json")).toMatchObject({
      "@type": "CreativeWork",
      conformsTo: { "@id": "https://w3id.org/ro/crate/1.2" },
      about: { "@id": "./" },
    });
    const root = entity("./");
    expect(root).toMatchObject({ "@type": "Dataset" });
    for (const name of ["name", "description", "datePublished", "license"]) {
      expect(root).toHaveProperty(name);
    }
  });

  it("describes every file with its format, and no other", () => {
    const described = crate["@graph"].filter((one) => one["@type"] === "File");
    const paths = [...files.keys()].filter((path) => path !== "ro-crate-metadata.json").sort();
    expect(described.map((one) => one["@id"]).sort()).toEqual(paths);
    expect(described.filter((one) => typeof one["encodingFormat"] !== "string")).toEqual([]);
    const parts = entity("./")?.["hasPart"] as { "@id": string }[];
    expect(parts.map((one) => one["@id"]).sort()).toEqual(paths);
  });

  it("refers to nothing that isn't in it, and names each thing once", () => {
    const ids = crate["@graph"].map((one) => one["@id"]);
    expect(new Set(ids).size).toBe(ids.length);
    const referred = [...text("ro-crate-metadata.json").matchAll(/\{"@id":"([^"]+)"\}/g)];
    const outside = referred.map((match) => match[1]).filter((id) => !ids.includes(id as string));
    expect(outside).toEqual(["https://w3id.org/ro/crate/1.2"]);
  });

  it("knows people by opaque ids, until they publish who they are", () => {
    expect(entity("#member-m-1")).toMatchObject({ "@type": "Person", name: "m-1" });
    const orcid = "https://orcid.org/0000-0000-0000-0001";
    const people = [{ member: "m-1", name: "Invented Person", orcid }];
    const licence = "https://creativecommons.org/licenses/by/4.0/";
    const archive = writeArchive({ ...input, people, licence });
    const published = text("ro-crate-metadata.json", filesOf(archive));
    expect(published).toContain(`"@id":"${orcid}","@type":"Person","name":"Invented Person"`);
    expect(published).toContain(`"license":{"@id":"${licence}"}`);
    expect(failures(verify(archive))).toEqual([]);
  });
});

it("a token beside a head is verified by whoever can, over the head's note", () => {
  const size = 9;
  const input = archiveInput(marshTransactions());
  const archive = writeArchive({ ...input, timeStamps: [{ size, token: Uint8Array.of(1, 2) }] });
  const seen: unknown[] = [];
  const report = verify(archive, {
    verifyToken: (token, note) => {
      seen.push([...token], new TextDecoder().decode(note));
      return { ok: true, at: "2031-02-01T00:00:01Z", authority: "an authority" };
    },
  });
  expect(seen).toEqual([[1, 2], input.heads[0]]);
  expect(detailOf(report, "time-stamps")).toBe(
    "ok: heads/0000000009.note stamped at 2031-02-01T00:00:01Z by an authority",
  );
  const refused = verify(archive, { verifyToken: () => ({ ok: false, reason: "another digest" }) });
  expect(detailOf(refused, "time-stamps")).toBe("failed: heads/0000000009.tsr: another digest");
  expect(detailOf(verify(archive), "time-stamps")).toContain("this version can't check");
});
