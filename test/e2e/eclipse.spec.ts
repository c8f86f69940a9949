import { spawnSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import type { Page } from "@playwright/test";
import { expect, test } from "@playwright/test";
import { strFromU8, strToU8, unzipSync, zipSync } from "fflate";
import {
  closeRegistration,
  declareCampaign,
  declarePart,
  registerHypothesis,
} from "./campaign-pages";
import { bringTable } from "./hum-campaign";
import { signUp } from "./people";
import type { Person } from "./people";
import { atPointer, printedInterval, shownNumbers, unaccountedNumbers } from "./shown-numbers";

/**
 * The main job by hand, on the published results of Dyson, Eddington & Davidson, Phil. Trans. R.
 * Soc. A 220 (1920) 291-333; expected standings recomputed with scipy from the published inputs
 * (see test/reference/README.md).
 */
const root = path.resolve(import.meta.dirname, "../..");
const reference = path.join(root, "test/reference/campaigns");
const published = readJson(path.join(reference, "eclipse-1919.json"));
const expected = readJson(path.join(reference, "eclipse-1919.expected.json"));
const weighhouse = path.join(root, "apps/cli/bin/weighhouse.mjs");

const key = `eclipse-${Date.now()}`;
const teams = { none: "No Deflection", half: "Corpuscles", full: "Relativity" };
const measurand = "Deflection at the limb, May 1919";
const csv = [
  "id,measurand,facility,observedAt,value,sd [arcsec]",
  ...published.measurements.map((m: Record<string, unknown>) =>
    [m.id, m.measurand, m.facility, m.observedAt, m.value, m.sd].join(","),
  ),
].join("\n");

test("a campaign goes the whole way: declared, predicted, measured, scored live, exported, verified", async ({
  browser,
}, info) => {
  test.setTimeout(600_000);
  const coordinator = await signUp(browser, "Coordinator");
  const theorists = new Map<string, Person>();
  for (const [hypothesis, team] of Object.entries(teams)) {
    theorists.set(hypothesis, await signUp(browser, `${team} theorist`));
  }

  await test.step("the coordinator declares the campaign", () =>
    declareAll(coordinator.page, theorists));

  await test.step("three teams register their predictions", async () => {
    for (const hypothesis of published.hypotheses) {
      const [prediction] = hypothesis.predictions;
      await registerHypothesis(theorists.get(hypothesis.key)!.page, key, {
        key: hypothesis.key,
        title: hypothesis.title,
        statement: `Light passing the limb is deflected by ${prediction.expected} arcsec.`,
        expected: String(prediction.expected),
        measurand,
      });
    }
  });

  await test.step("registration closes", () => closeRegistration(coordinator.page, key));

  const watcher = await (await browser.newContext()).newPage();
  await watcher.goto(`/campaigns/${key}`);
  await expect(watcher.getByText("live", { exact: false }).first()).toBeVisible();
  await watcher.evaluate(() => ((window as { stayed?: boolean }).stayed = true));

  await test.step("a CSV with a bad row is shown at its row and enters nothing", async () => {
    await previewCsv(coordinator.page, csv.replace("1.61", "about 1.6"));
    const rows = coordinator.page.getByRole("table", { name: "Rows" });
    await expect(rows.getByRole("row", { name: /about 1\.6/ })).toContainText(/number/);
    await expect(coordinator.page.getByRole("button", { name: /^Post / })).toHaveCount(0);
  });

  await test.step("the two measurements are posted while a second browser watches", async () => {
    await previewCsv(coordinator.page, csv);
    await coordinator.page.getByRole("button", { name: /^Post 2/ }).click();
    await expect(coordinator.page.getByText("2 measurements are on record")).toBeVisible();
    await expect(watcher.locator('[data-at="/hypotheses/0/chiSquare"]').first()).toHaveText("1.77");
    const stayed = await watcher.evaluate(() => (window as { stayed?: boolean }).stayed);
    expect(stayed, "the watching page moved without a reload").toBe(true);
  });

  const standings = await test.step("every number on the page is the expected one", () =>
    checkNumbers(watcher));

  await test.step("a hypothesis registered afterwards is marked and leaves the standings alone", async () => {
    const { page } = theorists.get("full")!;
    await registerHypothesis(page, key, {
      key: "late",
      title: "Fitted afterwards",
      statement: "Light passing the limb is deflected by what was measured.",
      expected: "1.93",
      measurand,
    });
    await expect(page.getByText("filed after data").first()).toBeVisible();
    const after = await scored(watcher);
    for (const hypothesis of standings.hypotheses as { key: string; lnEvidence: number }[]) {
      const now = after.hypotheses.find((each: { key: string }) => each.key === hypothesis.key);
      expect(now.lnEvidence).toBe(hypothesis.lnEvidence);
    }
    const late = after.hypotheses.find((each: { key: string }) => each.key === "late");
    expect(late.compared).toBe(0);
    expect(
      after.verdicts.find((each: { hypothesis: string }) => each.hypothesis === "late").order,
    ).toBe("after");
  });

  const archive = info.outputPath("audit.zip");
  await test.step("the archive is exported and verifies, line by line", async () => {
    await coordinator.page.goto(`/campaigns/${key}/audit`);
    const download = coordinator.page.waitForEvent("download");
    await coordinator.page.getByRole("link", { name: "Make and download the archive" }).click();
    await (await download).saveAs(archive);
    const verified = verify(archive);
    expect(verified.status, verified.stdout + verified.stderr).toBe(0);
    expect(verified.stdout).not.toMatch(/^failed/m);
    expect(verified.stdout).toMatch(/^ok +standings/m);
    expect(verified.stdout).toMatch(/^ok +before and after data .* 1 of them .* filed after data/m);
  });

  await test.step("the archive checks in the browser too", async () => {
    await coordinator.page.getByLabel("Archive to check").setInputFiles(archive);
    await coordinator.page.getByRole("button", { name: "Check archive" }).click();
    await expect(coordinator.page.getByText("Good.", { exact: true })).toBeVisible();
  });

  await test.step("one byte of the ledger changed: verify names the place", () => {
    const changed = withByteChanged(archive, "ledger.ndjson", '"seq":3', '"seq":7');
    const { status, stdout, stderr } = verify(changed);
    expect(status).toBe(1);
    expect(stdout + stderr).toContain("ledger.ndjson");
  });

  await test.step("one byte of the standings changed: verify names the place", () => {
    const text = strFromU8(unzipSync(readFileSync(archive))["standings.json"]!);
    const digits = /"chiSquare": ?(\d\.\d{4})/.exec(text)![1]!;
    const other = digits.slice(0, -1) + ((Number(digits.at(-1)) + 1) % 10);
    const changed = withByteChanged(archive, "standings.json", digits, other);
    const { status, stdout, stderr } = verify(changed);
    expect(status).toBe(1);
    expect(stdout + stderr).toContain("standings.json");
    expect(stdout + stderr).toContain("chiSquare");
  });
});

async function declareAll(page: Page, theorists: Map<string, Person>) {
  const { title, summary } = published.campaign;
  await declareCampaign(page, { key, title, summary });
  const [observable] = published.observables;
  await declarePart(page, {
    at: `/campaigns/${key}/declare/observables`,
    button: "Declare observable",
    fields: { Title: observable.title, Key: observable.key, Unit: observable.unit },
  });
  const [limb] = published.measurands;
  await declarePart(page, {
    at: `/campaigns/${key}/declare/quantities`,
    button: "Declare quantity",
    fields: {
      Title: limb.title,
      Key: limb.key,
      "Window from": "1919-05-29",
      "Window to": "1919-05-30",
      "Lower bound": String(limb.reference.lower),
      "Upper bound": String(limb.reference.upper),
    },
  });
  for (const facility of published.facilities) {
    await declarePart(page, {
      at: `/campaigns/${key}/declare/facilities`,
      button: "Declare facility",
      fields: { Title: facility.title, Key: facility.key },
    });
  }
  for (const [hypothesis, team] of Object.entries(teams)) {
    await declarePart(page, {
      at: `/campaigns/${key}/declare/teams`,
      button: "Add team",
      fields: { Title: team, Key: `team-${hypothesis}` },
    });
    await declarePart(page, {
      at: `/campaigns/${key}/members`,
      button: "Add member",
      fields: { "E-mail": theorists.get(hypothesis)!.email },
      choices: { Team: team },
    });
  }
}

async function previewCsv(page: Page, text: string) {
  await page.goto(`/campaigns/${key}/post?by=table`);
  await bringTable(page, "plates.csv", text);
  await page.getByRole("button", { name: "Preview" }).click();
  await expect(page.getByRole("region", { name: "Preview" })).toBeVisible();
}

async function scored(page: Page) {
  const answer = await page.request.get(`/api/v1/campaigns/${key}/standings.json`);
  expect(answer.ok()).toBe(true);
  return answer.json();
}

/** The page against the standings document, and the document against the expected file. */
async function checkNumbers(page: Page) {
  const standings = await scored(page);
  for (const [hypothesis, values] of Object.entries<Record<string, number>>(expected.hypotheses)) {
    const found = standings.hypotheses.find((each: { key: string }) => each.key === hypothesis);
    for (const [name, value] of Object.entries(values)) {
      expect(relative(found[name], value), `${hypothesis} ${name}`).toBeLessThan(1e-9);
    }
  }
  for (const { hypothesis, verdict } of standings.verdicts) {
    expect(verdict).toBe(expected.verdicts[hypothesis]);
  }
  const [{ combined }] = standings.measurands;
  expect(relative(combined.value, expected.combined.value)).toBeLessThan(1e-9);
  expect(relative(combined.sd, expected.combined.sd)).toBeLessThan(1e-9);

  const shown = await shownNumbers(page);
  expect(shown.length).toBeGreaterThan(30);
  for (const { at, text, exact } of shown) {
    const value = atPointer(standings, at);
    expect(value, `${at} is in the standings document`).not.toBeUndefined();
    if (exact !== null) expect(Number(exact), at).toBe(value);
    const interval = printedInterval(text);
    if (interval === null || typeof value !== "number") continue;
    expect(value, `${at} printed as ${text}`).toBeGreaterThanOrEqual(interval[0]);
    expect(value, `${at} printed as ${text}`).toBeLessThanOrEqual(interval[1]);
  }
  expect(await unaccountedNumbers(page)).toEqual([]);

  await page.getByText("The same as a table").click();
  const newest = page
    .getByRole("table", { name: /ln evidence after each move/ })
    .locator("tbody tr")
    .first();
  for (const { title, lnEvidence } of published.hypotheses.map(
    (each: { key: string; title: string }) => ({
      title: each.title,
      lnEvidence: expected.hypotheses[each.key].lnEvidence,
    }),
  )) {
    const [low, high] = printedInterval(
      (await newest.locator(`td[data-label="${title}"]`).textContent()) ?? "",
    )!;
    expect(lnEvidence).toBeGreaterThanOrEqual(low);
    expect(lnEvidence).toBeLessThanOrEqual(high);
  }
  return standings;
}

const relative = (found: number, value: number) =>
  value === 0 ? Math.abs(found) : Math.abs(found - value) / Math.abs(value);

function verify(file: string) {
  return spawnSync(process.execPath, [weighhouse, "verify", file], { encoding: "utf8" });
}

/** A copy of the archive with one byte of one file changed: the texts differ in one character. */
function withByteChanged(archive: string, name: string, from: string, to: string): string {
  const files = unzipSync(readFileSync(archive));
  const text = strFromU8(files[name]!);
  expect(text).toContain(from);
  files[name] = strToU8(text.replace(from, to));
  const changed = archive.replace(/\.zip$/, `-${name}.zip`);
  writeFileSync(changed, zipSync(files));
  return changed;
}

// oxlint-disable-next-line typescript/no-explicit-any -- a document read from a file, checked by use
function readJson(file: string): any {
  return JSON.parse(readFileSync(file, "utf8"));
}
