import { sensitivityOf } from "@weighhouse/engine/sensitivity/sensitivity";
import { defineCommand } from "citty";
import { descriptions } from "../descriptions";
import { invalid, readDocumentFile } from "../document-file";
import { sensitivityReport } from "../print/sensitivity-report";
import { progressOf } from "../progress";
import { terminalOf } from "../terminal";

export const sensitivity = defineCommand({
  meta: { name: "sensitivity", description: descriptions.sensitivity },
  args: {
    campaign: {
      type: "positional",
      description: "Campaign document (JSON); - reads stdin",
      required: true,
    },
    json: { type: "boolean", description: "Write the sensitivity document" },
  },
  async run({ args }) {
    const document = await readDocumentFile(args.campaign);
    const progress = progressOf("Scored changes");
    const found = sensitivityOf(document, { progress: progress.report });
    progress.end();
    if (!found.ok) throw invalid(found.problems);
    process.stdout.write(
      args.json
        ? `${JSON.stringify(found.value, null, 2)}\n`
        : sensitivityReport(document, found.value, terminalOf(process.stdout)),
    );
  },
});
