import { readFileSync } from "node:fs";
import path from "node:path";
import { expect, test } from "@playwright/test";
import { signUp } from "./people";

/**
 * Values: published results of Dyson, Eddington & Davidson (1920), standings recomputed with scipy
 * (see test/reference/README.md).
 */
const reference = path.resolve(import.meta.dirname, "../reference/campaigns");
const document = readFileSync(path.join(reference, "eclipse-1919.json"), "utf8");
const expected = JSON.parse(
  readFileSync(path.join(reference, "eclipse-1919.expected.json"), "utf8"),
);

test("a campaign document is imported: bad input is shown, its own dates are kept as claimed", async ({
  browser,
}) => {
  const { page } = await signUp(browser, "Importer");
  const key = `imported-${Date.now()}`;
  await page.goto("/import-campaign");
  const form = page.getByRole("form", { name: "Import a campaign document" });

  await form.getByLabel("Document as text").fill(document.replace('"sd": 0.17', '"sd": -0.17'));
  await form.getByLabel("Key here").fill(key);
  await form.getByRole("button", { name: "Preview import" }).click();
  await expect(page.getByText("/measurements/0/sd", { exact: false }).first()).toBeVisible();
  await expect(page.getByRole("button", { name: "Import campaign" })).toHaveCount(0);

  const claiming = JSON.parse(document);
  claiming.hypotheses[2].registeredAt = "1915-11-25T00:00:00Z";
  await form.getByLabel("Document as text").fill(JSON.stringify(claiming));
  await form.getByRole("button", { name: "Preview import" }).click();
  await expect(page.getByText("General relativity").first()).toBeVisible();
  await page.getByRole("button", { name: "Import campaign" }).click();
  await expect(page).toHaveURL(new RegExp(`/campaigns/${key}$`));
  await expect(page.locator('[data-at="/hypotheses/0/chiSquare"]').first()).toHaveText("1.77");

  const answer = await page.request.get(`/api/v1/campaigns/${key}/standings.json`);
  const { hypotheses, verdicts } = await answer.json();
  for (const { key: name, chiSquare, lnEvidence } of hypotheses) {
    const { chiSquare: chi, lnEvidence: ln } = expected.hypotheses[name];
    expect(Math.abs(chiSquare / chi - 1)).toBeLessThan(1e-9);
    expect(Math.abs(lnEvidence / ln - 1)).toBeLessThan(1e-9);
  }
  // Registered here after the eclipse and before the posting, whatever the document says of 1915.
  for (const { order } of verdicts) expect(order).toBe("before-posting");

  const folded = await (await page.request.get(`/api/v1/campaigns/${key}/document.json`)).json();
  expect(folded.hypotheses[2].registeredAt).not.toBe("1915-11-25T00:00:00Z");
});
