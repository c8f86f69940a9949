import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type {
  CampaignDocument,
  Hypothesis,
  Measurand,
  Prior,
  Reference,
} from "@weighhouse/campaign/document";
import type { Payload } from "@weighhouse/campaign/entries";
import type { Order, Standings } from "@weighhouse/campaign/standings";
import { formatCount, formatNumber, formatPercent } from "@weighhouse/figures/numbers";
import { formatLog10B, formatPosterior } from "@weighhouse/figures/standing-numbers";
import { formatDate } from "@weighhouse/figures/times";
import { counted } from "./checks/line";
import { inClosedForm } from "./closed-form";

export type MethodsFacts = {
  document: CampaignDocument;
  standings: Standings;
  records: readonly LedgerRecord[];
  /** Root of the ledger's tree, base64. */
  root: string;
  /** What the archive leaves out, in words. */
  leftOut: readonly string[];
};

/** `methods.md`: what a methods section has to say, with every count taken from the ledger. */
export function methodsText(facts: MethodsFacts): string {
  const { document, standings, records } = facts;
  const counts = countsOf(facts);
  const parts = [
    `# Methods: ${oneLine(document.campaign.title)}`,
    paragraph(facts, counts),
    `## What was predicted, and when\n\n${predictionsTable(counts)}`,
    `## The rule\n\n${ruleWords(document)}`,
    `## No-model ranges (references)\n\n${list(document.measurands.map(referenceLine))}`,
    `## Priors of the hypotheses' parameters\n\n${list(document.hypotheses.flatMap(priorLines))}`,
    `## Left out of this archive\n\n${list([...facts.leftOut])}`,
    `## To cite\n\n${list([...ownCitations(facts), ...literature(document, standings)])}`,
    `## Sources of the measurements\n\n${list(sourcesOf(document))}`,
  ];
  const cited = records.filter(({ kind }) => kind === "standings.cited").map(citationLine);
  if (cited.length > 0) parts.push(`## Standings cited\n\n${list(cited)}`);
  return `${parts.join("\n\n")}\n`;
}

type Counts = {
  predictions: Record<Order, number>;
  sealed: number;
  revealed: number;
  measurements: number;
  withdrawn: number;
  corrected: number;
  setAside: number;
  retired: number;
  late: number;
};

/** Counted in the entries, not in the document: what was taken back is in the entries only. */
function countsOf({ document, standings, records }: MethodsFacts): Counts {
  const count = (kind: LedgerRecord["kind"]) => records.filter((one) => one.kind === kind).length;
  const posted = records.reduce((sum, { kind, payload }) => {
    if (kind !== "measurements.posted") return sum;
    return sum + (payload as Payload<"measurements.posted">).measurements.length;
  }, count("measurement.revealed"));
  const predictions = { "before-observation": 0, "before-posting": 0, after: 0, undated: 0 };
  const filed = new Set(
    document.hypotheses.flatMap(({ key, predictions: said }) =>
      said.map(({ measurand }) => `${key} ${measurand}`),
    ),
  );
  for (const { hypothesis, measurand, order } of standings.verdicts) {
    if (filed.has(`${hypothesis} ${measurand}`)) predictions[order] += 1;
  }
  return {
    predictions,
    sealed: count("prediction.sealed"),
    revealed: count("prediction.revealed"),
    measurements: posted,
    withdrawn: posted - document.measurements.length,
    corrected: count("measurement.corrected"),
    setAside: document.measurements.filter(({ setAside }) => setAside !== null).length,
    retired: count("hypothesis.retired"),
    late: predictions.after,
  };
}

function paragraph(facts: MethodsFacts, counts: Counts): string {
  const { document, standings, records, root } = facts;
  const total = Object.values(counts.predictions).reduce((sum, each) => sum + each, 0);
  const [first, second] = standings.hypotheses;
  const size = records.length;
  const sentences = [
    `${capital(words(document.hypotheses.length, "hypothesis", "hypotheses"))} with ${words(total, "prediction")} were put on record in an append-only ledger (${words(size, "entry", "entries")}, Merkle root \`${root}\`) and compared with ${words(standings.measurements.counted, "counted measurement")} of ${words(document.measurands.length, "quantity", "quantities")}.`,
    `Of the predictions, ${formatCount(counts.predictions["before-observation"])} were filed before observation, ${formatCount(counts.predictions["before-posting"])} before posting and ${formatCount(counts.late)} after data; the last are listed and do not count.`,
    counts.sealed === 0
      ? "No prediction was sealed."
      : `${capital(words(counts.sealed, "prediction"))} ${counts.sealed === 1 ? "was" : "were"} sealed, ${formatCount(counts.revealed)} of them revealed in time.`,
    `Of ${words(counts.measurements, "measurement")} ever posted, ${formatCount(counts.withdrawn)} were withdrawn and ${formatCount(counts.setAside)} are set aside, each with its reason; there were ${words(counts.corrected, "correction")}.`,
    `Evidences are marginal likelihoods over each hypothesis's declared tolerances, parameters and shared errors, ${evidenceWords(standings)}, computed by Weighhouse engine ${standings.engine}; a hypothesis that is silent on a quantity is charged the no-model range declared beforehand.`,
  ];
  if (first !== undefined && second !== undefined) {
    sentences.push(
      `The highest evidence is that of “${titleOf(document, first.key)}” (posterior ${formatPosterior(first.posterior)} under the stated weights); log10 of the Bayes factor of the next, “${titleOf(document, second.key)}”, against it is ${formatLog10B(second.log10BayesFactor)}.`,
    );
  }
  sentences.push(
    "A standing compares the hypotheses on the table under their stated priors and tolerances; it is not the probability that any of them is true.",
  );
  return sentences.join(" ");
}

function evidenceWords({ hypotheses }: Standings): string {
  if (inClosedForm(hypotheses)) return "all in closed form";
  const largest = Math.max(...hypotheses.map(({ lnEvidenceError }) => lnEvidenceError));
  return `integrated numerically where they have no closed form (standard error of ln Z at most ${formatNumber(largest, 2)})`;
}

function predictionsTable(counts: Counts): string {
  const rows: [string, number][] = [
    ["predictions filed before observation", counts.predictions["before-observation"]],
    ["predictions filed before posting", counts.predictions["before-posting"]],
    ["predictions filed after data (not counted)", counts.late],
    ["predictions without a date to compare", counts.predictions.undated],
    ["predictions sealed", counts.sealed],
    ["sealed predictions revealed", counts.revealed],
    ["hypotheses retired", counts.retired],
    ["measurements ever posted", counts.measurements],
    ["measurements withdrawn", counts.withdrawn],
    ["corrections of measurements", counts.corrected],
    ["measurements set aside", counts.setAside],
  ];
  return ["| | number |", "| --- | --: |", ...rows.map(([what, n]) => `| ${what} | ${n} |`)].join(
    "\n",
  );
}

function ruleWords({ campaign }: CampaignDocument): string {
  const { rule, noneOfThese, registrationCloses, dataCloses } = campaign;
  return [
    `A tolerance interval reaches ${formatNumber(rule.coverage)} standard deviations to each side. A prediction passes where the probability that the true value lies within is at least ${formatPercent(rule.pass)}, and fails where the probability that it lies beyond one end is at least ${formatPercent(1 - rule.fail)} and its own chi-square agrees (p < 0.01).`,
    registrationCloses === null
      ? "Registration has no closing date."
      : `Registration closes on ${formatDate(registrationCloses)} (\`${registrationCloses}\`).`,
    dataCloses === null
      ? "Data have no closing date."
      : `Data close on ${formatDate(dataCloses)} (\`${dataCloses}\`).`,
    noneOfThese.weight > 0
      ? `“None of these” takes part with weight ${formatNumber(noneOfThese.weight)}.`
      : "“None of these” has no weight.",
  ].join(" ");
}

function referenceLine({ key, title, reference, scatter }: Measurand): string {
  const flicker = scatter > 0 ? `; scatter of the quantity itself ${formatNumber(scatter)}` : "";
  const name = title === null || title === key ? "" : ` (${oneLine(title)})`;
  return `\`${key}\`${name}: ${referenceWords(reference)}${flicker}`;
}

function referenceWords(reference: Reference | null): string {
  if (reference === null) return "none declared";
  const scatter = reference.scatter > 0 ? `, scatter ${formatNumber(reference.scatter)}` : "";
  switch (reference.family) {
    case "uniform":
      return `uniform from ${formatNumber(reference.lower)} to ${formatNumber(reference.upper)}${scatter}`;
    case "normal":
    case "gamma":
      return `${reference.family}, mean ${formatNumber(reference.mean)}, sd ${formatNumber(reference.sd)}${scatter}`;
    case "polynomial":
      return `polynomial of degree ${reference.degree} in ${reference.in}, centre ${formatNumber(reference.centre)}, coefficients' sd ${formatNumber(reference.sd)}${scatter}`;
  }
}

function priorLines({ key, parameters }: Hypothesis): string[] {
  return parameters.map(
    ({ key: name, prior, unit }) =>
      `\`${key}\`, \`${name}\`${unit === null ? "" : ` (${oneLine(unit)})`}: ${priorWords(prior)}`,
  );
}

function priorWords({ family, ...numbers }: Prior): string {
  const said = Object.entries(numbers as Record<string, number>);
  return [family, ...said.map(([name, value]) => `${name} ${formatNumber(value)}`)].join(", ");
}

function ownCitations({ document, standings, records, root }: MethodsFacts): string[] {
  const at = records.at(-1)?.at ?? "";
  return [
    `“${oneLine(document.campaign.title)}”, audit trail as of entry ${records.length - 1} (${at}), Merkle root ${root}.`,
    `Weighhouse engine ${standings.engine}.`,
  ];
}

/** What was used, and no more: a method that no number here comes from is not cited. */
function literature(
  { measurements, derived }: CampaignDocument,
  { verdicts }: Standings,
): string[] {
  const uses = (used: boolean, text: string) => (used ? [text] : []);
  return [
    "Evaluation of measurement data: Guide to the expression of uncertainty in measurement, JCGM 100:2008.",
    ...uses(
      verdicts.some(({ conformance }) => conformance !== null),
      "Evaluation of measurement data: The role of measurement uncertainty in conformity assessment, JCGM 106:2012.",
    ),
    ...uses(
      derived.length > 0,
      "Evaluation of measurement data: Supplement 1 to the GUM, JCGM 101:2008.",
    ),
    "R. E. Kass and A. E. Raftery, Bayes factors, J. Am. Stat. Assoc. 90 (1995) 773.",
    ...uses(
      measurements.some(({ plus }) => plus !== null),
      "R. Barlow, Asymmetric errors, arXiv:physics/0401042 and physics/0406120 (2004).",
    ),
    "B. Laurie, A. Langley and E. Kasper, Certificate Transparency, RFC 6962 (2013), section 2.1.",
    "A. Rundgren, B. Jordan and S. Erdtman, JSON Canonicalization Scheme, RFC 8785 (2020).",
    "S. Josefsson and I. Liusvaara, Edwards-Curve Digital Signature Algorithm, RFC 8032 (2017).",
  ];
}

function sourcesOf({ measurements }: CampaignDocument): string[] {
  const sources = new Map<string, number>();
  for (const { source } of measurements) {
    if (source !== null) sources.set(source, (sources.get(source) ?? 0) + 1);
  }
  return [...sources].map(([source, n]) => `${oneLine(source)} (${counted(n, "measurement")})`);
}

function citationLine({ payload, seq }: LedgerRecord): string {
  const { code, by, note } = payload as Payload<"standings.cited">;
  return `\`${code}\`, as of the first ${seq} entries, by ${by}${note === null ? "" : `: ${oneLine(note)}`}`;
}

function titleOf({ hypotheses }: CampaignDocument, key: string): string {
  return oneLine(hypotheses.find((one) => one.key === key)?.title ?? "none of these");
}

function list(items: string[]): string {
  return items.length === 0 ? "None." : items.map((item) => `- ${item}`).join("\n");
}

function words(count: number, noun: string, plural = `${noun}s`): string {
  return `${formatCount(count)} ${count === 1 ? noun : plural}`;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

function oneLine(text: string): string {
  return text.replaceAll(/\s+/g, " ");
}
