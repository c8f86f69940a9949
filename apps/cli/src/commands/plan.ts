import { planOf } from "@weighhouse/engine/plan/plan";
import { defineCommand } from "citty";
import { readCandidatesFile } from "../candidates-file";
import { descriptions } from "../descriptions";
import { invalid, readDocumentFile } from "../document-file";
import { planReport } from "../print/plan-report";
import { progressOf } from "../progress";
import { terminalOf } from "../terminal";

export const plan = defineCommand({
  meta: { name: "plan", description: descriptions.plan },
  args: {
    campaign: {
      type: "positional",
      description: "Campaign document (JSON); - reads stdin",
      required: true,
    },
    candidates: {
      type: "string",
      description: "Measurements that could be made (JSON)",
      valueHint: "FILE",
      required: true,
    },
    json: { type: "boolean", description: "Write the plan document" },
  },
  async run({ args }) {
    const document = await readDocumentFile(args.campaign);
    const candidates = await readCandidatesFile(args.candidates, document);
    const progress = progressOf("Weighed candidates");
    const planned = planOf(document, candidates, { progress: progress.report });
    progress.end();
    if (!planned.ok) throw invalid(planned.problems);
    process.stdout.write(
      args.json
        ? `${JSON.stringify(planned.value, null, 2)}\n`
        : planReport(document, planned.value, terminalOf(process.stdout)),
    );
  },
});
