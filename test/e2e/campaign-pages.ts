import type { Page } from "@playwright/test";
import { expect } from "@playwright/test";

/** What a coordinator and a team do on the pages, in the words of the pages. */
type Campaign = { key: string; title: string; summary: string };

export async function declareCampaign(page: Page, campaign: Campaign) {
  await page.goto("/new-campaign");
  await page.getByLabel("Title").fill(campaign.title);
  await page.getByLabel("Key").fill(campaign.key);
  await page.getByLabel("Summary").fill(campaign.summary);
  await page.getByRole("button", { name: "Declare campaign" }).click();
  await expect(page).toHaveURL(new RegExp(`/campaigns/${campaign.key}`));
}

/** Fills a part's form and sends it; the part then stands in the page's table. */
export async function declarePart(
  page: Page,
  {
    at,
    button,
    fields,
    choices = {},
  }: {
    at: string;
    button: string;
    fields: Record<string, string>;
    choices?: Record<string, string>;
  },
) {
  await page.goto(at);
  const form = page.getByRole("form").filter({ has: page.getByRole("button", { name: button }) });
  for (const [label, choice] of Object.entries(choices)) {
    await form.getByLabel(label).selectOption({ label: choice });
  }
  for (const [label, text] of Object.entries(fields)) {
    await form.getByLabel(label, { exact: false }).first().fill(text);
  }
  await form.getByRole("button", { name: button }).click();
  await expect(
    page.getByRole("table").getByText(fields.Key ?? fields["E-mail"] ?? "", { exact: true }),
  ).toBeVisible();
}

export async function registerHypothesis(
  page: Page,
  campaign: string,
  hypothesis: {
    title: string;
    key: string;
    statement: string;
    expected: string;
    measurand: string;
  },
) {
  await page.goto(`/campaigns/${campaign}/register`);
  await page.getByLabel("Title").fill(hypothesis.title);
  await page.getByLabel("Statement").fill(hypothesis.statement);
  await page.getByLabel("Key").fill(hypothesis.key);
  await page.getByRole("button", { name: "Continue to predictions" }).click();
  const card = page.getByRole("group", { name: hypothesis.measurand });
  await card.getByLabel("We predict a value").check();
  await card.getByLabel("Expected value").fill(hypothesis.expected);
  await card.getByLabel("Theory error").selectOption("exact");
  await page.getByRole("button", { name: "Continue to review" }).click();
  await expect(page.getByText("We are wrong if", { exact: false })).toBeVisible();
  await page.getByRole("button", { name: "Register hypothesis" }).click();
  await expect(page).toHaveURL(new RegExp(`/campaigns/${campaign}/hypotheses/${hypothesis.key}`));
}

export async function closeRegistration(page: Page, campaign: string) {
  await page.goto(`/campaigns/${campaign}/declare/registration`);
  await page.getByLabel("Close it for good, now").check();
  await page.getByRole("button", { name: "Close registration" }).click();
  await expect(page.getByText(/registration closed/i).first()).toBeVisible();
}
