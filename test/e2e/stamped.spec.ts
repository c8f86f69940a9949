import { execFileSync } from "node:child_process";
import path from "node:path";
import { expect, test } from "@playwright/test";

const tsx = path.resolve(import.meta.dirname, "../../node_modules/tsx/dist/cli.mjs");
const program = path.join(import.meta.dirname, "write-stamped-archive.ts");

test("time-stamps of an archive are verified in the browser", async ({ page }, info) => {
  await page.goto("/campaigns/aldmark-warm-bed/audit");
  const check = async (name: string, added: string) => {
    const file = info.outputPath(name);
    execFileSync(process.execPath, [tsx, program, file, added]);
    await page.getByLabel("Archive to check").setInputFiles(file);
    await page.getByRole("button", { name: "Check archive" }).click();
    await expect(page.getByText(name, { exact: false }).first()).toBeVisible();
    return page.getByRole("row", { name: /^time-stamps / });
  };
  await expect(await check("good.zip", "")).toContainText(
    /ok.*note stamped at .*Z by Test authority/,
  );
  await expect(await check("bad.zip", "\n")).toContainText(/failed.*it stamps other bytes/);
});
