import { createHash, randomBytes } from "node:crypto";
import { archiveInput } from "@weighhouse/audit/testing/marsh-campaign";
import { writeArchive } from "@weighhouse/audit/write";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import { timeStampRequest } from "@weighhouse/timestamps/request";
import { TestAuthority } from "@weighhouse/timestamps/testing/authority";
import { expect, test } from "@playwright/test";

/** An archive whose last head has a time-stamp of openssl's over a text. */
function stampedOver(text: (note: string) => string): Buffer {
  const authority = new TestAuthority();
  const input = archiveInput();
  const note = input.heads.at(-1)!;
  const digest = createHash("sha256").update(text(note)).digest();
  const request = timeStampRequest(new Uint8Array(digest), new Uint8Array(randomBytes(16)));
  const timeStamps = [{ size: parseTreeHead(note).size, token: authority.answer(request) }];
  authority.remove();
  return Buffer.from(writeArchive({ ...input, timeStamps }));
}

test("time-stamps of an archive are verified in the browser", async ({ page }) => {
  await page.goto("/campaigns/aldmark-warm-bed/audit");
  const check = async (buffer: Buffer) => {
    const file = { name: "marsh.zip", mimeType: "application/zip", buffer };
    await page.getByLabel("Archive to check").setInputFiles(file);
    await page.getByRole("button", { name: "Check archive" }).click();
    return page.getByRole("row", { name: /^time-stamps / });
  };
  await expect(await check(stampedOver((note) => note))).toContainText(
    /ok.*note stamped at .*Z by Test authority/,
  );
  await expect(await check(stampedOver((note) => `${note}\n`))).toContainText(
    /failed.*it stamps other bytes/,
  );
});
