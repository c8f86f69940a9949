import { rename, rm, writeFile } from "node:fs/promises";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { Refusal, wrongUsage } from "../refusal";
import { ask, campaignAddress, requireCampaignKey } from "../server";

export const exportTrail = defineCommand({
  meta: { name: "export", description: descriptions.export },
  args: {
    campaign: {
      type: "string",
      description: "Key of the campaign",
      valueHint: "KEY",
      required: true,
    },
    output: {
      type: "string",
      alias: "o",
      description: "File to write",
      valueHint: "AUDIT.zip",
      required: true,
    },
  },
  async run({ args }) {
    const bytes = await download(requireCampaignKey(args.campaign));
    await writeWhole(args.output, bytes);
    process.stderr.write(`Saved ${args.output} (${bytes.length} bytes)\n`);
  },
});

async function download(campaign: string): Promise<Uint8Array> {
  const address = campaignAddress(campaign, "audit.zip");
  const body = await ask(address, { accept: "application/zip" });
  if (body[0] !== 0x50 || body[1] !== 0x4b) {
    throw new Refusal(3, [`${address.href} answered with something that is no ZIP archive`]);
  }
  return body;
}

/** Never half a file: written beside, then renamed. */
async function writeWhole(path: string, bytes: Uint8Array): Promise<void> {
  const draft = `${path}.${process.pid}.part`;
  try {
    await writeFile(draft, bytes);
    await rename(draft, path);
  } catch (error) {
    await rm(draft, { force: true });
    const why = (error as NodeJS.ErrnoException).code ?? String(error);
    throw wrongUsage(`found no way to write ${path} (${why}); allowed the path of a file to make`);
  }
}
