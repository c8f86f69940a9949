import { spawnSync } from "node:child_process";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { unpackFiles } from "@weighhouse/audit/zip/read";
import { marshArchives, hostileTitles } from "./campaigns";
import { removeUnpacked, unpacked } from "./unpacked";

afterAll(removeUnpacked);

const [, marsh] = marshArchives()[0] as [string, Uint8Array];

describe.each([
  ["of the marsh", marsh],
  ["with hostile titles", hostileTitles()],
])("tables for print %s compile as they are", (_, archive) => {
  const folder = unpacked(archive);
  const tables = [...unpackFiles(archive).keys()].filter((name) => name.endsWith(".tex"));

  it.each(tables)("%s", (table) => {
    // No shell, no files but TeX's own: what a title says is never done.
    const run = spawnSync(
      "/usr/bin/pdflatex",
      ["-interaction=nonstopmode", "-halt-on-error", "-no-shell-escape", path.basename(table)],
      {
        cwd: path.join(folder, "tables"),
        env: { PATH: "/usr/bin:/bin", HOME: folder, openin_any: "p" },
      },
    );
    const log = run.stdout.toString();
    expect(run.status, log.slice(-2000)).toBe(0);
    expect(log).toMatch(/Output written on .*\.pdf/);
    expect(log).not.toMatch(/Missing character|undefined|\(\/etc\/passwd/);
  });
});
