import { scoreCampaign } from "@weighhouse/engine/score";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { invalid, readDocumentFile } from "../document-file";
import { counted, warningLines } from "../print/warnings";
import { terminalOf } from "../terminal";

export const check = defineCommand({
  meta: { name: "check", description: descriptions.check },
  args: {
    campaign: {
      type: "positional",
      description: "Campaign document (JSON); - reads stdin",
      required: true,
    },
  },
  async run({ args }) {
    const document = await readDocumentFile(args.campaign);
    // Warnings come with the scores; what can't be scored yet is an error here too.
    const scored = scoreCampaign(document);
    if (!scored.ok) throw invalid(scored.problems);
    const parts = [
      counted(document.hypotheses.length, "hypothesis", "hypotheses"),
      counted(document.measurands.length + document.derived.length, "measurand"),
      counted(document.measurements.length, "measurement"),
      counted(scored.value.warnings.length, "warning"),
    ];
    process.stdout.write(`Valid: ${parts.join(", ")}\n`);
    process.stdout.write(warningLines(scored.value.warnings, terminalOf(process.stdout)));
  },
});
