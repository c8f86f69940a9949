import type { Browser, Page } from "@playwright/test";
import { expect, test } from "@playwright/test";
import { AxeBuilder } from "@axe-core/playwright";
import { bringTable, importHum } from "./hum-campaign";
import { signUp } from "./people";

/** An observer with a table fresh from reduction: into the ledger without retyping. */
const nightly = [
  "DATE-OBS,hum [Hz],e_hum,wind [m/s],seeing",
  "2024-03-02T21:00:00,110.2,1.5,4,0.8",
  "2024-03-05T21:00:00,108.9,1.2,7,0.9",
  "2024-04-02T21:00:00,112.4,1.4,5,1.1",
].join("\n");

async function observer(browser: Browser, name: string): Promise<{ page: Page; base: string }> {
  const person = await signUp(browser, name);
  const base = await importHum(person);
  await person.page.goto(`${base}/post?by=table`);
  return { page: person.page, base };
}

async function previewed(page: Page): Promise<void> {
  await page.getByRole("button", { name: /^Preview/ }).click();
  await expect(page.getByRole("region", { name: "Preview" })).toBeVisible({ timeout: 120_000 });
}

test("a file of a night is in the ledger after two buttons, each row in its quantity", async ({
  browser,
}) => {
  const { page, base } = await observer(browser, "Nightly");
  await bringTable(page, "night.csv", nightly);
  const columns = page.getByRole("table", { name: "Columns" });
  await expect(columns.getByRole("row", { name: /^hum/ })).toContainText("by its name");
  await expect(columns.getByLabel("Column e_hum is read as")).toHaveValue(/^sd/);
  await expect(columns.getByLabel("Column seeing is read as")).toHaveValue("extra");
  await expect(columns.getByLabel("Column DATE-OBS: time scale")).toHaveValue("utc");
  await page.getByLabel("Facility", { exact: true }).selectOption({ label: "Tower" });
  await previewed(page);
  const preview = page.getByRole("region", { name: "Preview" });
  await expect(preview).toContainText("3 new. All can be entered.");
  await expect(preview).toContainText("Verdicts that would turn");
  const rows = page.getByRole("table", { name: "Rows" });
  await expect(rows.getByRole("row", { name: /Hum in April/ })).toContainText("112.4 ± 1.4 Hz");
  await page.getByRole("button", { name: "Post 3 measurements" }).click();
  await expect(page.getByText("3 measurements are on record")).toBeVisible();

  const document = await (await page.request.get(`/api/v1${base}/document.json`)).json();
  const posted = document.measurements as Record<string, unknown>[];
  expect(posted.map(({ measurand }) => measurand).toSorted()).toEqual(["april", "march", "march"]);
  expect(posted.find(({ measurand }) => measurand === "april")).toMatchObject({
    facility: "tower",
    observedAt: "2024-04-02T21:00:00Z",
    value: 112.4,
    sd: 1.4,
    conditions: { wind: 5 },
    extra: { seeing: 1.1 },
  });

  await bringTable(page, "night.csv", nightly);
  await page.getByLabel("Facility", { exact: true }).selectOption({ label: "Tower" });
  await previewed(page);
  await expect(preview).toContainText("3 already there. There is nothing new to enter.");
});

test("a match that was corrected is remembered for the facility, and can be forgotten", async ({
  browser,
}) => {
  const { page } = await observer(browser, "Corrector");
  const table = (value: number) => `when;peak;scatter\n60375,5;${value},2;1,5\n`;
  const column = (name: string) => page.getByLabel(`Column ${name} is read as`);
  const row = (name: string) => page.getByRole("row", { name: new RegExp(`^${name}`) });
  await bringTable(page, "odd.csv", table(110));
  await page.getByLabel("Facility", { exact: true }).selectOption({ label: "Pier microphone" });
  await column("peak").selectOption("value");
  await column("scatter").selectOption("sd");
  await expect(row("peak")).toContainText("chosen here");
  await column("when").selectOption("observedAt");
  await expect(row("when")).toContainText("where nothing says what it counts");
  await page.getByLabel("Column when: form of its times").selectOption("mjd");
  await expect(row("when")).toContainText("MJD in UTC to ISO 8601");
  await previewed(page);
  await expect(page.getByRole("table", { name: "Rows" })).toContainText("110.2 ± 1.5 Hz");
  await page.getByRole("button", { name: "Post 1 measurement" }).click();
  await expect(page.getByText("1 measurement is on record")).toBeVisible();

  await bringTable(page, "next.csv", table(112));
  await page.getByLabel("Facility", { exact: true }).selectOption({ label: "Pier microphone" });
  await expect(row("peak")).toContainText("remembered for Pier microphone");
  await expect(column("scatter")).toHaveValue("sd");
  await expect(page.getByLabel("Column when: form of its times")).toHaveValue("mjd");
  await expect(page.getByText("Read as the last table of Pier microphone")).toBeVisible();

  await page.getByRole("button", { name: "Forget that" }).click();
  await expect(row("peak")).not.toContainText("remembered");
  await page.reload();
  await expect(row("peak")).toBeVisible();
  await expect(row("peak")).not.toContainText("remembered");
});

test("a bad row says its line, its column and what is allowed; nothing is entered unless it is left out", async ({
  browser,
}) => {
  const { page, base } = await observer(browser, "Unlucky");
  const bad = nightly.replace("108.9,1.2", "108.9,-1.2").replace("2024-04-02", "2024-07-02");
  await bringTable(page, "bad.csv", bad);
  await previewed(page);
  const preview = page.getByRole("region", { name: "Preview" });
  await expect(preview).toContainText("1 new, 2 refused");
  await expect(page.getByRole("button", { name: /^Post \d/ })).toHaveCount(0);
  await page.getByRole("button", { name: "Next fault" }).click();
  const focused = page.locator("tr:focus");
  await expect(focused).toContainText("e_hum: Found -1.2; allowed is a number above 0.");
  await expect(focused.getByRole("rowheader")).toHaveText(/3$/);
  await page.getByRole("button", { name: "Next fault" }).click();
  await expect(focused.getByRole("rowheader")).toHaveText(/4$/);
  await page.getByRole("button", { name: "Refused 2" }).click();
  await expect(page.locator("tbody tr[data-index]")).toHaveCount(2);

  await page.getByLabel("Leave out the 2 rows at fault").check();
  await expect(preview).toContainText("2 at fault are left out");
  await page.getByRole("button", { name: "Post 1 measurement" }).click();
  await expect(page.getByText("2 rows at fault were left out, as you chose.")).toBeVisible();
  const document = await (await page.request.get(`/api/v1${base}/document.json`)).json();
  expect(document.measurements).toHaveLength(1);
});

test("a row in conflict says which field differs, and is entered as a correction for a reason", async ({
  browser,
}) => {
  const { page, base } = await observer(browser, "Second");
  const named = (value: number) =>
    `id,observedAt,hum,e_hum\nhum-1,2024-03-02T21:00:00Z,${value},1\n`;
  await bringTable(page, "first.csv", named(110));
  await previewed(page);
  await page.getByRole("button", { name: "Post 1 measurement" }).click();
  await expect(page.getByText("1 measurement is on record")).toBeVisible();
  await bringTable(page, "second.csv", named(111));
  await previewed(page);
  await expect(page.getByRole("region", { name: "Preview" })).toContainText("1 in conflict");
  await expect(page.getByRole("table", { name: "Rows" })).toContainText(
    "On record with another value: 110 there, 111 here.",
  );

  const corrections = page.getByRole("region", { name: "Corrections" });
  await corrections.getByRole("button", { name: "See what correcting them changes" }).click();
  await expect(corrections).toContainText("Empty; allowed is a line");
  await corrections.getByLabel("Reason").fill("the wind screen was off");
  await corrections.getByRole("button", { name: "See what correcting them changes" }).click();
  await expect(corrections).toContainText("hum-1: value 110 → 111");
  await expect(corrections).toContainText("Verdicts that would turn");
  await corrections.getByRole("button", { name: "Correct 1 measurement" }).click();
  await expect(page.getByRole("region", { name: "Preview" })).toContainText("1 already there");
  await page.goto(`${base}/measurements/hum-1`);
  await expect(page.getByText("the wind screen was off").first()).toBeVisible();
});

test("neither a reload, nor an ended session, nor a lost connection loses a table", async ({
  browser,
}) => {
  const { page, base } = await observer(browser, "Patient");
  await bringTable(page, "night.csv", nightly);
  await page.getByLabel("Column seeing is read as").selectOption("ignore");
  await page.getByLabel("Batch").fill("night 12");
  await previewed(page);
  await page.reload();
  await expect(page.getByText("night.csv")).toBeVisible();
  await expect(page.getByLabel("Column seeing is read as")).toHaveValue("ignore");
  await expect(page.getByLabel("Batch")).toHaveValue("night 12");

  const cookies = await page.context().cookies();
  await page.context().clearCookies();
  await page.getByRole("button", { name: "Preview" }).click();
  await expect(page.getByRole("link", { name: "sign in again" })).toHaveAttribute(
    "href",
    `/sign-in?next=${encodeURIComponent(`${base}/post?by=table`)}`,
  );
  await page.context().addCookies(cookies);
  await previewed(page);

  const posting = /\/measurements$/;
  await page.route(posting, async (route) => {
    // The server enters it, and its answer is lost on the way.
    await route.fetch();
    await route.abort("connectionreset");
  });
  await page.getByRole("button", { name: "Post 3 measurements" }).click();
  await expect(page.getByText("The connection broke before the server had answered")).toBeVisible();
  await page.unroute(posting);
  await page.getByRole("button", { name: "Post 3 measurements" }).click();
  await expect(page.getByText("3 measurements are on record")).toBeVisible();
  const document = await (await page.request.get(`/api/v1${base}/document.json`)).json();
  expect(document.measurements).toHaveLength(3);
  expect(document.measurements[0]).toMatchObject({ batch: "night 12", extra: {} });
});

test("rows can be pasted, and a file that is no table says where and why", async ({ browser }) => {
  const { page } = await observer(browser, "Paster");
  await page.getByText("Or paste rows").click();
  await page.getByRole("button", { name: "Read these rows" }).click();
  await expect(page.getByText("Empty: paste rows with a header line")).toBeVisible();
  await page.getByLabel("Rows", { exact: false }).first().fill(nightly);
  await page.getByRole("button", { name: "Read these rows" }).click();
  await expect(page.getByText("3 rows", { exact: false }).first()).toBeVisible();
  await bringTable(page, "broken.csv", 'value,sd\n"1,2\n');
  await expect(page.getByRole("alert").first()).toContainText("Line 2");
  await expect(page.getByRole("button", { name: "Preview" })).toBeDisabled();
});

test("a hundred thousand rows leave the page at hand, and only those in the window are drawn", async ({
  browser,
}) => {
  test.setTimeout(600_000);
  const { page } = await observer(browser, "Surveyor");
  const rows = Array.from({ length: 100_000 }, (_, index) => {
    const at = new Date(Date.UTC(2024, 2, 2) + index * 20_000).toISOString();
    const sd = index === 60_000 ? -1 : 1.5;
    return `${at},${(110 + (index % 50) / 10).toFixed(1)},${sd}`;
  });
  await bringTable(page, "survey.csv", ["observedAt,hum,e_hum", ...rows].join("\n"));
  // While it is read and matched in the worker, the page answers.
  const theme = page.getByLabel("Light or dark");
  await expect(page.getByRole("button", { name: "Stop" })).toBeVisible();
  await theme.selectOption({ index: 1 });
  await expect(page.locator("html")).toHaveAttribute("data-theme", /light|dark/);
  const list = page.getByRole("table", { name: "Rows" });
  await expect(list).toHaveAttribute("aria-rowcount", "100001", { timeout: 240_000 });
  await page.getByRole("button", { name: "Next fault" }).click();
  await expect(page.locator("tr:focus")).toHaveAttribute("aria-rowindex", "60002");
  await expect(page.locator("tr:focus")).toContainText("e_hum: Found -1");
  expect(await list.locator("tbody tr[data-index]").count()).toBeLessThan(150);

  // A preview can be left, and the table is still there.
  await page.getByRole("button", { name: "Preview" }).click();
  await expect(page.getByText(/Previewing|Sending|received/).first()).toBeVisible();
  await page.getByRole("button", { name: "Stop" }).click();
  await expect(page.getByRole("button", { name: "Stop" })).toBeHidden();
  await expect(page.getByRole("button", { name: "Preview" })).toBeEnabled();
});

test("results from the same data stand side by side, and the ledger's page says which time-stamps it lacks", async ({
  browser,
}) => {
  const { page, base } = await observer(browser, "Again");
  const both = [
    "id,observedAt,hum,e_hum,sameData,method,setAside",
    "tape-a,2024-03-02T21:00:00Z,110,1,tape 4,peak,",
    "tape-b,2024-03-02T21:00:00Z,111.5,0.8,tape 4,fit,the peak counts",
  ].join("\n");
  await bringTable(page, "again.csv", both);
  await previewed(page);
  await page.getByRole("button", { name: "Post 2 measurements" }).click();
  await expect(page.getByText("2 measurements are on record")).toBeVisible();
  await page.goto(`${base}/measurements/tape-a`);
  const rows = page.getByRole("table", { name: "Results from the same data" });
  await expect(rows.getByRole("row", { name: /^tape-a this one/ })).toContainText("counts");
  const other = rows.getByRole("row", { name: /^tape-b/ });
  await expect(other).toContainText("111.50 ± 0.80 Hz");
  await expect(other).toContainText("set aside: the peak counts");
  await expect(other).toContainText("method: fit and peak");
  await page.goto(`${base}/ledger`);
  const stamps = page.getByRole("region", { name: /^Time-stamps/ });
  await expect(stamps).toContainText("No head of this ledger is time-stamped.");
  await expect(stamps).toContainText("the newest, with no time-stamp since a day or more");
});

test("the page holds up at any width, by day and by night", async ({ browser }) => {
  const { page } = await observer(browser, "Looker");
  await bringTable(page, "bad.csv", nightly.replace("108.9,1.2", "108.9,-1.2"));
  await previewed(page);
  const looks = [
    { width: 390, height: 844, colorScheme: "dark" as const },
    { width: 390, height: 844, colorScheme: "light" as const },
    { width: 1440, height: 900, colorScheme: "dark" as const },
    { width: 1440, height: 900, colorScheme: "light" as const },
  ];
  for (const { colorScheme, ...size } of looks) {
    await page.setViewportSize(size);
    await page.emulateMedia({ colorScheme });
    const { violations } = await new AxeBuilder({ page })
      .withTags(["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"])
      .analyze();
    const faults = violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html}`);
    expect.soft(faults, `${colorScheme} at ${size.width}`).toEqual([]);
    const overflow = await page.evaluate(
      () => window.document.documentElement.scrollWidth - window.innerWidth,
    );
    expect.soft(overflow, `at ${size.width}`).toBeLessThanOrEqual(0);
  }
});
