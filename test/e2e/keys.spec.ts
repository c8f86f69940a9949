import { AxeBuilder } from "@axe-core/playwright";
import type { Page } from "@playwright/test";
import { expect, test } from "@playwright/test";
import { declareCampaign } from "./campaign-pages";
import { signUp } from "./people";

/** At both widths, in both lights: nothing wider than the window, no fault that axe finds. */
async function holdsUp(page: Page): Promise<void> {
  const looks = [
    { width: 390, height: 844, colorScheme: "dark" as const },
    { width: 1440, height: 900, colorScheme: "light" as const },
  ];
  for (const { colorScheme, ...viewport } of looks) {
    await page.setViewportSize(viewport);
    await page.emulateMedia({ colorScheme });
    const wide = () => document.documentElement.scrollWidth - document.documentElement.clientWidth;
    expect(await page.evaluate(wide), page.url()).toBeLessThanOrEqual(0);
    const { violations } = await new AxeBuilder({ page }).analyze();
    const faults = violations.map(({ id, nodes }) => [id, ...nodes.map(({ html }) => html)]);
    expect(faults, page.url()).toEqual([]);
  }
}

test("a key is made by keyboard, shown once, copied, used by a program, and revoked", async ({
  browser,
}) => {
  const person = await signUp(browser, "Ola Kabel");
  const { page, context } = person;
  const key = `harbour-${Date.now()}`;
  await declareCampaign(page, { key, title: "Why the harbour silts up", summary: "Invented." });
  const campaign = `/campaigns/${key}`;
  await context.grantPermissions(["clipboard-read", "clipboard-write"]);

  await page.goto(`${campaign}/members`);
  await page.getByRole("link", { name: "Keys", exact: true }).click();
  await expect(page.getByText("No key holds.")).toBeVisible();
  const form = page.getByRole("form", { name: "Make a key" });
  const name = form.getByLabel("What it is for");
  await expect(name).toBeEnabled();

  // A key for nothing, and of no name, is refused at its fields.
  await form.getByLabel("Read").uncheck();
  await form.getByLabel("Post measurements").uncheck();
  await form.getByRole("button", { name: "Make key" }).click();
  await expect(form.getByText("Tick one or more")).toBeVisible();
  await expect(form.getByText("Empty; allowed is")).toBeVisible();
  await holdsUp(page);

  await form.getByLabel("Read").check();
  await name.fill("pier microphone");
  await name.press("Enter");
  const shown = page.locator("[data-api-key]");
  await expect(shown).toHaveText(/^weighhouse_[a-z2-7]{40}$/);
  const text = (await shown.textContent()) ?? "";
  // The button that copies it has the focus.
  await page.keyboard.press("Enter");
  await expect(page.getByText("Copied.")).toBeVisible();
  expect(await page.evaluate(() => navigator.clipboard.readText())).toBe(text);
  const row = page.getByRole("row", { name: /pier microphone/ });
  await expect(row).toContainText("never");
  await holdsUp(page);

  // A program has no cookies: the key alone opens what it is for.
  const program = await browser.newContext({
    extraHTTPHeaders: { authorization: `Bearer ${text}` },
  });
  const read = await program.request.get(`/api/v1${campaign}/document.json`);
  expect(read.status()).toBe(200);
  expect(read.headers()["ratelimit"]).toMatch(/^"read";r=\d+;t=\d+$/);
  const posted = await program.request.post(`/api/v1${campaign}/measurements`, { data: {} });
  expect(posted.status()).toBe(403);
  expect(posted.headers()["www-authenticate"]).toContain('scope="measurements:post"');
  await page.reload();
  await expect(row).not.toContainText("never");
  await expect(page.getByText(text)).toHaveCount(0);
  expect(await page.content()).not.toContain(text.slice(15));

  await row.getByRole("button", { name: "Revoke pier microphone" }).press("Enter");
  await page.keyboard.press("Enter");
  await expect(page.getByText("No key holds.")).toBeVisible();
  expect((await program.request.get(`/api/v1${campaign}/document.json`)).status()).toBe(401);
  await page.locator("summary", { hasText: "Keys that ended" }).click();
  await expect(page.getByRole("row", { name: /pier microphone/ })).toContainText("revoked");
  await holdsUp(page);

  // From another origin's page the session opens nothing over HTTP.
  const other = { origin: "http://elsewhere.example" };
  const forged = await page.request.post(`/api/v1${campaign}/measurements`, {
    headers: other,
    data: {},
  });
  expect(forged.status()).toBe(403);
  expect(((await forged.json()) as { code: string }).code).toBe("other-origin");
  const pages = await page.request.post("/api/trpc/apiKeys.make", { headers: other, data: {} });
  expect(pages.status()).toBe(403);
  await program.close();
  await context.close();
});

test("the page for programs shows every operation of the description, and an example of each", async ({
  page,
}) => {
  await page.goto("/programs?campaign=bridge");
  const given = await page.request.get("/api/v1/openapi.json");
  const { paths } = (await given.json()) as {
    paths: Record<string, Record<string, { operationId: string; summary: string }>>;
  };
  const operations = Object.values(paths).flatMap((item) => Object.values(item));
  expect(operations.length).toBeGreaterThan(20);
  for (const { operationId, summary } of operations) {
    const shown = page.locator(`article#${operationId}`);
    await expect(shown.getByRole("heading", { name: summary, exact: true })).toBeVisible();
    await expect(shown.locator("pre")).toContainText("curl");
    await expect(shown.locator("pre")).toContainText("/api/v1/campaigns/bridge/");
  }
  await page.getByText("fields").first().click();
  await holdsUp(page);
});
