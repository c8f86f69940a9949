import { readFileSync } from "node:fs";
import path from "node:path";
import { AxeBuilder } from "@axe-core/playwright";
import type { BrowserContext, Page } from "@playwright/test";
import { expect, test } from "@playwright/test";
import { atPointer, printedInterval, shownNumbers } from "./shown-numbers";

/** The demo campaign, as its users meet it on a first start. */
const demo = "/campaigns/aldmark-warm-bed";
const api = `/api/v1${demo}`;
const password = () =>
  readFileSync(path.join(process.env.WEIGHHOUSE_TEST_HOME ?? "", "demo-password"), "utf8").trim();

async function signIn(context: BrowserContext, who: string, origin: string) {
  const answer = await context.request.post("/api/auth/sign-in/email", {
    headers: { origin },
    data: { email: `${who}@demo.example`, password: password() },
  });
  expect(answer.ok(), await answer.text()).toBe(true);
}

const publicPages = [
  "/campaigns",
  "/sign-in",
  "/sign-up",
  demo,
  `${demo}?size=40`,
  `${demo}/quantities`,
  `${demo}/quantities/heat-flux-a`,
  `${demo}/quantities/melt-rate-a`,
  `${demo}/quantities/ice-profile-a`,
  `${demo}/quantities/icequakes-july`,
  `${demo}/quantities/uplift-b`,
  `${demo}/measurements/tilt-07`,
  `${demo}/seals`,
  `${demo}/hypotheses`,
  `${demo}/hypotheses/friction`,
  `${demo}/hypotheses/tidal-pumping`,
  `${demo}/ledger`,
  `${demo}/ledger/40`,
  `${demo}/audit`,
];
const coordinatorPages = [
  "/new-campaign",
  "/import-campaign",
  ...[
    "observables",
    "quantities",
    "shared-errors",
    "facilities",
    "teams",
    "campaign",
    "registration",
  ].map((part) => `${demo}/declare/${part}`),
  `${demo}/members`,
  `${demo}/webhooks`,
  `${demo}/post`,
  `${demo}/post?by=table`,
];
const teamPages = [
  `${demo}/register`,
  `${demo}/register?step=predictions`,
  `${demo}/hypotheses/friction/amend`,
];

const looks = [
  { width: 1440, height: 900, colorScheme: "light" as const },
  { width: 390, height: 844, colorScheme: "dark" as const },
];

for (const { width, height, colorScheme } of looks) {
  test(`every page at ${width} px, ${colorScheme}: accessible by axe, nothing wider than the window`, async ({
    browser,
    baseURL,
  }) => {
    test.setTimeout(600_000);
    const visits: [string | null, string[]][] = [
      [null, publicPages],
      ["coordinator", coordinatorPages],
      ["sliders", teamPages],
    ];
    for (const [who, paths] of visits) {
      const context = await browser.newContext({ viewport: { width, height }, colorScheme });
      if (who) await signIn(context, who, baseURL!);
      const page = await context.newPage();
      for (const place of paths) {
        await page.goto(place);
        await expect(page.locator("h1")).toBeVisible();
        const results = await new AxeBuilder({ page })
          .withTags(["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"])
          .analyze();
        const faults = results.violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html}`);
        expect.soft(faults, place).toEqual([]);
        const overflow = await page.evaluate(
          () => document.documentElement.scrollWidth - window.innerWidth,
        );
        expect.soft(overflow, `${place} is wider than the window`).toBeLessThanOrEqual(0);
      }
      await context.close();
    }
  });
}

test("the whole standings page is as of the size in its address", async ({ page, request }) => {
  for (const size of [30, 40]) {
    await page.goto(`${demo}?size=${size}`);
    const standings = await (await request.get(`${api}/standings.json?size=${size}`)).json();
    expect(standings.asOf.size).toBe(size);
    await holdAgainst(page, standings);
  }
});

test("a measurand's and a hypothesis's page show the standings' numbers", async ({
  page,
  request,
}) => {
  const standings = await (await request.get(`${api}/standings.json`)).json();
  for (const place of ["quantities/heat-flux-a", "hypotheses/friction", "hypotheses/brine-seep"]) {
    await page.goto(`${demo}/${place}`);
    await holdAgainst(page, standings);
  }
});

test("eight tabs of one browser all move at a posting", async ({ browser, baseURL }) => {
  const context = await browser.newContext();
  const tabs: Page[] = [];
  for (let tab = 0; tab < 8; tab += 1) {
    const page = await context.newPage();
    await page.goto(demo);
    tabs.push(page);
  }
  const counted = async (page: Page) =>
    Number(
      /([\d,]+) measurements/.exec(await page.locator("main").innerText())![1]!.replace(",", ""),
    );
  const before = await counted(tabs[0]!);

  const observer = await browser.newContext();
  await signIn(observer, "observer", baseURL!);
  const posting = await observer.newPage();
  await posting.goto(`${demo}/post`);
  await posting.getByLabel("Quantity").first().selectOption({ label: "Melt rate, borehole A" });
  await posting.getByLabel("Observed at").fill("2025-10-02 12:00");
  await posting.getByLabel("Value").fill("13.4");
  await posting.getByLabel("Uncertainty").fill("1.2");
  await posting.getByRole("button", { name: "Preview" }).click();
  await posting.getByRole("button", { name: "Post measurement", exact: true }).click();
  await expect(posting.getByText("1 measurement is on record")).toBeVisible();
  for (const page of tabs) {
    await expect.poll(() => counted(page), { timeout: 15_000 }).toBe(before + 1);
  }
});

test("what is typed outlives a reload", async ({ browser, baseURL }) => {
  const context = await browser.newContext();
  await signIn(context, "sliders", baseURL!);
  const page = await context.newPage();
  await page.goto(`${demo}/register`);
  await page.getByLabel("Title").fill("Heat of the tide");
  await page.getByLabel("Statement").fill("The tide warms the bed.");
  // The draft is written a moment after the last key.
  await page.waitForTimeout(1_000);
  await page.reload();
  await expect(page.getByLabel("Title")).toHaveValue("Heat of the tide");
  await expect(page.getByLabel("Statement")).toHaveValue("The tide warms the bed.");
});

test("a visitor reads everything and is asked to sign in before writing", async ({ page }) => {
  await page.goto(`${demo}/post`);
  await expect(page.getByRole("main").getByRole("link", { name: /sign in/i })).toBeVisible();
  await expect(page.getByRole("button", { name: "Preview" })).toHaveCount(0);
});

test("an entry's inclusion proof is checked in the browser", async ({ page }) => {
  await page.goto(`${demo}/ledger/20`);
  await expect(page.getByText("Checked in this browser", { exact: false })).toBeVisible();
});

async function holdAgainst(page: Page, standings: unknown) {
  const shown = await shownNumbers(page);
  expect(shown.length).toBeGreaterThan(5);
  for (const { at, text, exact } of shown) {
    const value = atPointer(standings, at);
    expect(value, `${at} is in the standings document`).not.toBeUndefined();
    if (exact !== null) expect(Number(exact), at).toBe(value);
    const interval = printedInterval(text);
    if (interval === null || typeof value !== "number") continue;
    expect(value, `${at} printed as ${text}`).toBeGreaterThanOrEqual(interval[0]);
    expect(value, `${at} printed as ${text}`).toBeLessThanOrEqual(interval[1]);
  }
}
