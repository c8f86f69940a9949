import { defineCommand } from "citty";
import { matchFlags } from "../post/match-flags";
import { postFile } from "../post/post-file";
import { requireCampaignKey } from "../server";
import { descriptions } from "../descriptions";

const ofRows = (what: string) => ({
  type: "string" as const,
  description: `The ${what} of rows that name none`,
  valueHint: "KEY",
});

export const post = defineCommand({
  meta: { name: "post", description: descriptions.post },
  args: {
    file: {
      type: "positional",
      description: "Measurements: CSV, ECSV, VOTable, JSON, or NDJSON of any size",
      valueHint: "FILE",
      required: true,
    },
    campaign: {
      type: "string",
      description: "Key of the campaign",
      valueHint: "KEY",
      required: true,
    },
    facility: ofRows("facility"),
    measurand: ofRows("measurand"),
    team: ofRows("team"),
    batch: { ...ofRows("batch"), valueHint: "NAME" },
    match: {
      type: "string",
      description: "What a column is read as: a field, extra or ignore; may be given again",
      valueHint: "COLUMN=FIELD",
    },
    "dry-run": { type: "boolean", description: "Tell what would happen; enter nothing" },
    json: { type: "boolean", description: "Write the server's answer as JSON" },
  },
  async run({ args, rawArgs }) {
    const { facility, measurand, team, batch } = args;
    return postFile(args.file, {
      campaign: requireCampaignKey(args.campaign),
      defaults: given({ facility, measurand, team, batch }),
      chosen: matchFlags(rawArgs),
      dryRun: args["dry-run"] === true,
      json: args.json === true,
    });
  },
});

function given(fields: Record<string, string | undefined>): Record<string, string> {
  return Object.fromEntries(
    Object.entries(fields).flatMap(([name, value]) => (value === undefined ? [] : [[name, value]])),
  );
}
