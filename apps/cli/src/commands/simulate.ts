import { simulate as simulateCampaign } from "@weighhouse/engine/simulation/simulate";
import { defineCommand } from "citty";
import { readCandidatesFile } from "../candidates-file";
import { descriptions } from "../descriptions";
import { invalid, readDocumentFile } from "../document-file";
import { simulationReport } from "../print/simulation-report";
import { progressOf } from "../progress";
import { wrongUsage } from "../refusal";
import { terminalOf } from "../terminal";

const MOST_RUNS = 100_000;

export const simulate = defineCommand({
  meta: { name: "simulate", description: descriptions.simulate },
  args: {
    campaign: {
      type: "positional",
      description: "Campaign document (JSON); - reads stdin",
      required: true,
    },
    candidates: {
      type: "string",
      description: "The measurements of the whole campaign (JSON)",
      valueHint: "FILE",
      required: true,
    },
    runs: {
      type: "string",
      description: "Campaigns drawn from each hypothesis",
      valueHint: "N",
      required: true,
    },
    json: { type: "boolean", description: "Write the simulation document" },
  },
  async run({ args }) {
    const runs = Number(args.runs);
    if (!(Number.isSafeInteger(runs) && runs >= 1 && runs <= MOST_RUNS)) {
      throw wrongUsage(`found --runs ${args.runs}; allowed a whole number from 1 to ${MOST_RUNS}`);
    }
    const document = await readDocumentFile(args.campaign);
    const candidates = await readCandidatesFile(args.candidates, document);
    const progress = progressOf("Drawn and scored campaigns");
    const simulated = simulateCampaign(document, candidates, { runs, progress: progress.report });
    progress.end();
    if (!simulated.ok) throw invalid(simulated.problems);
    process.stdout.write(
      args.json
        ? `${JSON.stringify(simulated.value, null, 2)}\n`
        : simulationReport(document, simulated.value, terminalOf(process.stdout)),
    );
  },
});
