import { createHash } from "node:crypto";
import { describe, expect, it, vi } from "vitest";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { archiveInput, marshTransactions } from "./testing/marsh-campaign";
import { fixedSigner } from "./testing/synthetic-ledger";
import { writeArchive } from "./write";
import { unpackFiles } from "./zip/read";

const input = archiveInput();
const archive = writeArchive(input);
const files = unpackFiles(archive);
const text = (path: string) => new TextDecoder().decode(files.get(path));

describe("an archive", () => {
  it("is the same bytes for the same input, whichever hasher makes it", () => {
    expect(writeArchive(archiveInput())).toEqual(archive);
    expect(writeArchive({ ...input, hasher: nodeHasher })).toEqual(archive);
  });

  it("is the same bytes in every time zone", () => {
    for (const zone of ["Pacific/Kiritimati", "America/St_Johns", "Pacific/Pago_Pago"]) {
      vi.stubEnv("TZ", zone);
      expect(new Date(1980, 0, 1).getTimezoneOffset()).not.toBe(0);
      expect(writeArchive(input)).toEqual(archive);
    }
    vi.unstubAllEnvs();
  });

  it("holds the files of its layout, the README first", () => {
    expect([...files.keys()]).toEqual([
      "README.md",
      "manifest.json",
      "manifest.note",
      "ro-crate-metadata.json",
      "methods.md",
      "check.py",
      "campaign.json",
      "standings.json",
      "sensitivity.json",
      "tables/hypotheses.csv",
      "tables/predictions.csv",
      "tables/measurements.csv",
      "tables/verdicts.csv",
      "tables/standings.csv",
      "tables/timeline.csv",
      "tables/hypotheses.tex",
      "tables/predictions.tex",
      "tables/measurements.tex",
      "tables/verdicts.tex",
      "tables/standings.tex",
      "figures/beam.svg",
      "figures/grid.svg",
      "figures/timeline.svg",
      "figures/measurands/vapour-may.svg",
      "figures/measurands/droplet-may.svg",
      "figures/measurands/vapour-june.svg",
      "ledger.ndjson",
      "payloads.ndjson",
      ...[9, 10, 11, 12, 13, 14, 16, 17].map(
        (size) => `heads/00000000${String(size).padStart(2, "0")}.note`,
      ),
      "keys/34750f98bd59fcfc.pub",
    ]);
  });

  it("names every other file in its manifest by its SHA-256, as node:crypto computes it", () => {
    const manifest = JSON.parse(text("manifest.json"));
    const listed = manifest.files.map(({ path, sha256 }: { path: string; sha256: string }) => [
      path,
      sha256,
    ]);
    const computed = [...files]
      .filter(([path]) => !path.startsWith("manifest."))
      .map(([path, bytes]) => [path, createHash("sha256").update(bytes).digest("hex")]);
    expect(listed).toEqual(computed);
  });

  it("says in its README that a clock is simulated, and only then", () => {
    const simulated = unpackFiles(writeArchive(archiveInput(marshTransactions("simulated"))));
    const readme = new TextDecoder().decode(simulated.get("README.md"));
    expect(readme).toContain("The clock of this ledger is simulated.");
    expect(text("README.md")).not.toContain("simulated");
  });

  it("quotes what a table's cell needs quoted, by RFC 4180, and names units in its header", () => {
    expect(text("tables/hypotheses.csv")).toContain('"Cold air from the\nside valley"\r\n');
    expect(text("tables/verdicts.csv").split("\r\n")[0]).toContain("value (in unit)");
    expect(text("tables/measurements.csv")).toContain("jetty:1,vapour-may,jetty,");
    expect(text("tables/measurements.csv")).toContain("the cap was on");
  });
});

describe("parts that are not of one ledger are refused", () => {
  it.each([
    [
      "a payload less than entries",
      { payloads: input.payloads.slice(1) },
      "17 entries, 16 payloads",
    ],
    ["no tree head", { heads: [] }, "0 tree heads"],
    ["a last head of fewer entries", { heads: input.heads.slice(0, -1) }, "a last head of 16"],
    ["payloads in another order", { payloads: [...input.payloads].reverse() }, "another kind"],
    [
      "a last head that none of the keys signed",
      { keys: [], signer: fixedSigner("house.example", 2) },
      "none of the keys signed",
    ],
  ])("%s", (_, change, message) => {
    expect(() => writeArchive({ ...input, ...change })).toThrow(message);
  });
});
