import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { replacing, tamper } from "@weighhouse/audit/testing/forge";
import { archiveInput } from "@weighhouse/audit/testing/marsh-campaign";
import type { VerifyReport } from "@weighhouse/audit/checks/line";
import { writeArchive } from "@weighhouse/audit/write";
import { afterAll, describe, expect, test } from "vitest";
import { weighhouse } from "./testing/command";

const folder = mkdtempSync(join(tmpdir(), "weighhouse-verify-"));
afterAll(() => rmSync(folder, { recursive: true }));

function file(name: string, content: string | Uint8Array): string {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
}

const input = archiveInput();
const archive = writeArchive(input);
const good = file("good.zip", archive);

describe("weighhouse verify", () => {
  test("says ok, line by line, of an archive as it was written", async () => {
    const { code, out, err } = await weighhouse(["verify", good]);
    expect([code, err]).toEqual([0, ""]);
    const lines = out.trimEnd().split("\n");
    expect(lines.filter((line) => line.startsWith("failed"))).toEqual([]);
    expect(lines.filter((line) => line.startsWith("ok")).length).toBeGreaterThan(8);
    expect(out).toMatch(
      /^not present +keys you hold +signed by [0-9a-f]{64}, not checked against/m,
    );
    expect(lines.at(-1)).toBe(`Nothing failed: ${good}`);
  });

  test("fails, naming the place, with one byte of the ledger changed", async () => {
    const path = file("ledger.zip", tamper(archive, { "ledger.ndjson": replacing("m-1", "m-2") }));
    const { code, out, err } = await weighhouse(["verify", path]);
    expect(code).toBe(1);
    expect(out).toMatch(/^failed/m);
    expect(err).toContain("ledger.ndjson");
  });

  test("fails, naming the place, with one number of the standings changed", async () => {
    // The first digit only: one that a double holds as exactly as before.
    const digit = (found: string) => (found === "1" ? "2" : "1");
    const changed = tamper(archive, {
      "standings.json": (text) =>
        text.replace(
          /("chiSquare":\s*)(\d)/,
          (_, member: string, first: string) => member + digit(first),
        ),
    });
    const { code, err } = await weighhouse(["verify", file("standings.zip", changed)]);
    expect(code).toBe(1);
    expect(err).toMatch(/standings.*chiSquare/);
  });

  test("checks a key and a head that the reader holds", async () => {
    const key = file("held.pub", `${input.keys[0]}\n`);
    const head = file("held.note", input.heads[1] ?? "");
    const { code, out } = await weighhouse(["verify", good, "--key", key, "--head", head]);
    expect(code).toBe(0);
    expect(out).toMatch(/^ok +keys you hold /m);
    expect(out).toMatch(/^ok +tree head you hold /m);
  });

  test("writes its report as JSON", async () => {
    const { code, out } = await weighhouse(["verify", good, "--json"]);
    expect(code).toBe(0);
    const report = JSON.parse(out) as VerifyReport;
    expect(report.ok).toBe(true);
    expect(report.lines[0]).toEqual({
      check: expect.any(String),
      outcome: "ok",
      detail: expect.any(String),
    });
  });

  test("refuses what is no archive", async () => {
    const { code, err } = await weighhouse(["verify", file("no.zip", "no archive")]);
    expect(code).toBe(1);
    expect(err).not.toBe("");
  });
});
