import { readSealedFile } from "@weighhouse/campaign/sealed-file";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { invalid, readTextFile } from "../document-file";
import { ask, campaignAddress } from "../server";

export const reveal = defineCommand({
  meta: { name: "reveal", description: descriptions.reveal },
  args: {
    file: {
      type: "positional",
      description: "The file that weighhouse seal wrote",
      valueHint: "SEALED.json",
      required: true,
    },
  },
  async run({ args }) {
    const read = readSealedFile(await readTextFile(args.file));
    if (!read.ok) throw invalid(read.problems);
    const { campaign, digest, nonce, content } = read.value;
    const address = campaignAddress(campaign, "seals/openings");
    const post = { digest, nonce, content };
    const answer = await ask(address, { accept: "application/json", post });
    const { from } = JSON.parse(new TextDecoder().decode(answer)) as { from: number };
    process.stdout.write(`Opened ${digest} in ${campaign}, entry ${from}\n`);
  },
});
