import { scoreCampaign } from "@weighhouse/engine/score";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { invalid, readDocumentFile } from "../document-file";
import { standingsReport } from "../print/standings-report";
import { terminalOf } from "../terminal";

export const score = defineCommand({
  meta: { name: "score", description: descriptions.score },
  args: {
    campaign: {
      type: "positional",
      description: "Campaign document (JSON); - reads stdin",
      required: true,
    },
    json: { type: "boolean", description: "Write the standings document" },
    "include-after": {
      type: "boolean",
      description: "Count predictions filed after data as the others",
    },
  },
  async run({ args }) {
    const document = await readDocumentFile(args.campaign);
    const scored = scoreCampaign(document, { includeAfter: args["include-after"] === true });
    if (!scored.ok) throw invalid(scored.problems);
    process.stdout.write(
      args.json
        ? `${JSON.stringify(scored.value, null, 2)}\n`
        : standingsReport(document, scored.value, terminalOf(process.stdout)),
    );
  },
});
