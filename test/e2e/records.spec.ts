import { readFileSync } from "node:fs";
import { AxeBuilder } from "@axe-core/playwright";
import type { Page } from "@playwright/test";
import { expect, test } from "@playwright/test";
import { signUp } from "./people";
import type { Person } from "./people";

// An invented campaign: why a spring runs warm in winter.
const measurand = (key: string, title: string) => ({
  key,
  title,
  observable: "warmth",
  reference: { family: "uniform", lower: 0, upper: 40 },
});
const document = {
  format: "weighhouse-campaign/1",
  campaign: { key: "spring", title: "Why the spring runs warm" },
  observables: [{ key: "warmth", title: "Temperature", unit: "degC", scale: "linear" }],
  measurands: [
    measurand("january", "January"),
    measurand("february", "February"),
    measurand("march", "March"),
  ],
  facilities: [{ key: "weir", title: "Weir" }],
  teams: [{ key: "shore", title: "Shore team" }],
  hypotheses: [
    {
      key: "deep-loop",
      title: "A deep loop",
      team: "shore",
      predictions: [{ measurand: "january", expected: 17, tolerance: { family: "normal", sd: 2 } }],
    },
    { key: "mild-winter", title: "A mild winter", predictions: [] },
  ],
  measurements: [18.1, 17.2].map((value, index) => ({
    id: `weir:${index + 1}`,
    measurand: "january",
    facility: "weir",
    team: "shore",
    observedAt: `2024-01-1${index}T08:00:00Z`,
    value,
    sd: 0.5,
  })),
};

async function call(page: Page, procedure: string, input: object): Promise<void> {
  const answer = await page.request.post(`/api/trpc/${procedure}`, { data: { json: input } });
  expect(answer.ok(), await answer.text()).toBe(true);
}

/** The campaign, with the person as its coordinator and in its one team. */
async function imported(person: Person): Promise<string> {
  const key = `spring-${Date.now()}`;
  await call(person.page, "campaigns.import", { text: JSON.stringify(document), key });
  await call(person.page, "members.add", {
    key,
    email: person.email,
    role: "coordinator",
    team: "shore",
  });
  return `/campaigns/${key}`;
}

async function send(page: Page, form: string, fields: Record<string, string>): Promise<void> {
  const place = page.getByRole("form", { name: form });
  for (const [label, text] of Object.entries(fields)) {
    const field = place.getByLabel(label).first();
    if ((await field.evaluate((element) => element.tagName)) === "SELECT") {
      await field.selectOption({ label: text });
    } else await field.fill(text);
  }
  await place.getByRole("button").last().click();
}

/** At both widths, in both lights: nothing wider than the window, no fault that axe finds. */
async function holdsUp(page: Page, places: string[]): Promise<void> {
  const looks = [
    { width: 390, height: 844, colorScheme: "dark" as const },
    { width: 1440, height: 900, colorScheme: "light" as const },
  ];
  for (const { colorScheme, ...size } of looks) {
    await page.setViewportSize(size);
    await page.emulateMedia({ colorScheme });
    for (const place of places) {
      await page.goto(place);
      await expect(page.locator("h1")).toBeVisible();
      const { violations } = await new AxeBuilder({ page })
        .withTags(["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"])
        .analyze();
      const faults = violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html}`);
      expect.soft(faults, `${place} at ${size.width}`).toEqual([]);
      const overflow = await page.evaluate(
        () => window.document.documentElement.scrollWidth - window.innerWidth,
      );
      expect.soft(overflow, `${place} at ${size.width}`).toBeLessThanOrEqual(0);
    }
  }
}

test("what is on record is corrected, withdrawn, questioned, sealed and cited on the pages", async ({
  browser,
}) => {
  test.setTimeout(400_000);
  const person = await signUp(browser, "Sealer");
  const { page } = person;
  const base = await imported(person);
  const visitor = await (await browser.newContext()).newPage();

  await test.step("an objection to a no-model range, and its answer", async () => {
    await page.goto(`${base}/quantities/february`);
    await send(page, "Object to the no-model range", {
      "What is wrong with it": "It never freezes there.",
    });
    await expect(page.getByText("It never freezes there.").first()).toBeVisible();
    await send(page, "Answer entry", { Answer: "It did in 1963." });
    await visitor.goto(`${base}/quantities/february`);
    await expect(visitor.getByText("It did in 1963.")).toBeVisible();
  });

  await test.step("a quantity is proposed", async () => {
    await page.goto(`${base}/propose`);
    const form = page.getByRole("form", { name: "Propose a quantity" });
    await form.getByLabel("Title").fill("April");
    await form.getByLabel("Lower").fill("0");
    await form.getByLabel("Upper").fill("40");
    await send(page, "Propose a quantity", { "Why it should be measured": "Snow melts then." });
    await expect(page).toHaveURL(new RegExp(`${base}/quantities$`));
    await expect(page.getByText("Snow melts then.")).toBeVisible();
  });

  await test.step("a held prediction is read by its team alone", async () => {
    await page.goto(`${base}/hypotheses/deep-loop/seal`);
    const form = page.getByRole("form", { name: "Seal a prediction" });
    await form.getByLabel("Quantity").selectOption({ label: "February" });
    await form.getByLabel("Expected value").fill("16.4813");
    await form.getByLabel("Standard deviation").fill("1.25");
    await form.getByLabel("Sealed until").fill("2090-01-01");
    await form.getByRole("button", { name: "Seal prediction" }).click();
    await expect(page.getByText("It is sealed, and will be opened by itself.")).toBeVisible();
    await page.goto(`${base}/seals`);
    await page.getByText("what it says, seen by you alone").click();
    await expect(page.getByText("16.4813")).toBeVisible();
    await visitor.goto(`${base}/seals`);
    await expect(visitor.getByRole("cell", { name: /prediction of “A deep loop”/ })).toBeVisible();
    expect(await visitor.content()).not.toContain("16.4813");
  });

  await test.step("a kept prediction is opened with the file that the page saved", async () => {
    await page.goto(`${base}/hypotheses/deep-loop/seal`);
    const form = page.getByRole("form", { name: "Seal a prediction" });
    await form.getByLabel("Quantity").selectOption({ label: "March" });
    await form.getByLabel("Expected value").fill("15.5");
    await form.getByLabel("Standard deviation").fill("1");
    await form.getByLabel("Kept by").selectOption({ label: "us, in a file" });
    await form.getByLabel("Sealed until").fill("2090-01-01");
    const saving = page.waitForEvent("download");
    await form.getByRole("button", { name: "Seal prediction" }).click();
    const download = await saving;
    const kept = readFileSync(await download.path(), "utf8");
    await expect(page.getByText("Keep the file that was saved", { exact: false })).toBeVisible();
    await page.goto(`${base}/seals`);
    const choose = async (text: string) =>
      page.getByRole("button", { name: "The file that you kept" }).setInputFiles({
        name: download.suggestedFilename(),
        mimeType: "application/json",
        buffer: Buffer.from(text),
      });
    await choose(kept.replace("15.5", "15.6"));
    await expect(
      page.getByText("/content: found a content and nonce", { exact: false }),
    ).toBeVisible();
    await choose(kept);
    await page.getByRole("button", { name: "Open this seal" }).click();
    await expect(page.getByText(/The seal .* is open/)).toBeVisible();
    await visitor.goto(`${base}/hypotheses/deep-loop`);
    await expect(visitor.getByText("1 sealed, 1 opened, 0 never opened")).toBeVisible();
  });

  await test.step("a correction keeps what was there before", async () => {
    await page.goto(`${base}/quantities/january`);
    await page.getByRole("link", { name: "weir:1" }).click();
    await send(page, "Correct this measurement", { Value: "19.3", Reason: "the wrong column" });
    await expect(page.getByText("It is corrected", { exact: false })).toBeVisible();
    await visitor.goto(`${base}/measurements/weir:1`);
    await expect(visitor.getByText(/19.30 ± 0.50/)).toBeVisible();
    await expect(visitor.getByText(/18.10 ± 0.50/)).toBeVisible();
    await expect(visitor.getByText("the wrong column")).toBeVisible();
  });

  let cited = "";
  await test.step("standings are cited", async () => {
    await page.goto(`${base}/audit`);
    await page.getByLabel("Cited in").fill("Notes on springs, 4");
    await page.getByRole("button", { name: "Cite the standings as they are now" }).click();
    await expect(page).toHaveURL(/\/cite\/[0-9a-z]{8}$/);
    cited = new URL(page.url()).pathname;
    await expect(page.getByText("Notes on springs, 4")).toBeVisible();
  });

  await test.step("what a facility observed is withdrawn at once, seen beforehand", async () => {
    await visitor.goto(cited);
    const before = await visitor.locator("main").innerText();
    await page.goto(`${base}/withdraw`);
    const form = page.getByRole("form", { name: "Withdraw measurements" });
    await form.getByLabel("Reason").fill("the probe lay dry");
    await form.getByRole("button", { name: "See what would be withdrawn" }).click();
    // A form sent too early must not mean everything.
    await expect(
      form.getByText("allowed is ids here, or a facility or a time below"),
    ).toBeVisible();
    await form.getByLabel("Facility").selectOption({ label: "Weir" });
    await form.getByLabel("Observed from").fill("2024-01-11");
    await form.getByRole("button", { name: "See what would be withdrawn" }).click();
    await expect(page.getByText("1 measurement: weir:2.")).toBeVisible();
    await form.getByRole("button", { name: "Withdraw 1 measurement" }).click();
    await expect(page.getByText("Withdrawn: 1 measurement.", { exact: false })).toBeVisible();
    await visitor.goto(`${base}/measurements/weir:2`);
    await expect(visitor.getByText("the probe lay dry").first()).toBeVisible();
    // What was cited stays as it was, to the letter.
    await visitor.goto(cited);
    expect(await visitor.locator("main").innerText()).toBe(before);
  });

  await test.step("a remark on an entry, and a hypothesis that is retired", async () => {
    await page.goto(`${base}/ledger/9`);
    await send(page, "Remark on this entry", { "In words": "Who read the gauge?" });
    await visitor.goto(`${base}/ledger/9`);
    await expect(visitor.getByText("Who read the gauge?")).toBeVisible();
    await page.goto(`${base}/hypotheses/deep-loop`);
    await send(page, "Retire this hypothesis", { Reason: "no loop was found" });
    await visitor.goto(`${base}/hypotheses/deep-loop`);
    await expect(visitor.getByText("no loop was found", { exact: false })).toBeVisible();
  });

  await holdsUp(page, [
    `${base}/quantities/february`,
    `${base}/propose`,
    `${base}/seals`,
    `${base}/seals/measurement`,
    `${base}/hypotheses/deep-loop`,
    `${base}/measurements/weir:1`,
    `${base}/withdraw`,
    `${base}/ledger/9`,
    `${base}/audit`,
    cited,
  ]);
});
