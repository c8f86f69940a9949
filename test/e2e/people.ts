import type { Browser, BrowserContext, Page } from "@playwright/test";
import { expect } from "@playwright/test";

export type Person = { name: string; email: string; page: Page; context: BrowserContext };

const password = "weighed in the open";

/** Makes an account through the page, in a browser of the person's own. */
export async function signUp(browser: Browser, name: string): Promise<Person> {
  const context = await browser.newContext();
  const page = await context.newPage();
  const email = `${name.toLowerCase().replaceAll(/[^a-z]+/g, "-")}-${Date.now()}@people.example`;
  await page.goto("/sign-up");
  await page.getByLabel("Name").fill(name);
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Make the account" }).click();
  await expect(page.getByRole("button", { name: "Sign out" })).toBeVisible();
  return { name, email, page, context };
}
