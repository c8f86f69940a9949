import { expect, test } from "@playwright/test";
import { declareCampaign } from "./campaign-pages";
import { signUp } from "./people";

test("a coordinator has an address told: its secret shown once, a test's fate in its log, removed again", async ({
  browser,
}) => {
  const { page, context } = await signUp(browser, "Toll Keeper");
  const key = `toll-${Date.now()}`;
  await declareCampaign(page, { key, title: "Why the toll bell rings", summary: "At night." });
  await page.goto(`/campaigns/${key}/webhooks`);
  await expect(page.getByText("No address is told yet.")).toBeVisible();
  const form = page.getByRole("form", { name: "Tell another address" });
  const address = form.getByRole("textbox", { name: "Address" });

  await address.fill("http://127.0.0.1:9/");
  await form.getByRole("button", { name: "Make webhook" }).click();
  await expect(form.getByText(/allowed is an https:\/\/ address/)).toBeVisible();

  const url = "https://bell-tower.invalid/told";
  await address.fill(url);
  await form.getByRole("button", { name: "Make webhook" }).click();
  await expect(page.getByRole("heading", { name: url })).toBeVisible();
  await expect(page.locator("[data-secret]")).toHaveText(/^[\w-]{43}$/);
  await page.reload();
  await expect(page.getByRole("heading", { name: url })).toBeVisible();
  await expect(page.locator("[data-secret]")).toHaveCount(0);

  await page.getByRole("button", { name: "Send a test" }).click();
  await expect(
    page.getByRole("cell", { name: /did not arrive: .*bell-tower\.invalid/ }),
  ).toBeVisible();

  await page.getByRole("button", { name: "Remove", exact: true }).click();
  await page.getByRole("button", { name: "Remove for good" }).click();
  await expect(page.getByText("No address is told yet.")).toBeVisible();
  await context.close();
});

test("a campaign's pages lead to its feed", async ({ page, request }) => {
  await page.goto("/campaigns/aldmark-warm-bed");
  const link = page.locator('head link[rel="alternate"][type="application/atom+xml"]');
  const feed = await request.get((await link.getAttribute("href"))!);
  expect(feed.headers()["content-type"]).toBe("application/atom+xml; charset=utf-8");
  expect(await feed.text()).toContain("<title>Measurements posted: ");
});
