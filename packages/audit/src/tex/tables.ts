import type {
  CampaignDocument,
  Measurement,
  Observable,
  Prediction,
} from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import {
  ABSENT,
  formatCount,
  formatInterval,
  formatMeasured,
  formatNumber,
} from "@weighhouse/figures/numbers";
import {
  formatChiSquare,
  formatLnEvidence,
  formatLog10B,
  formatP,
  formatPosterior,
  formatTension,
} from "@weighhouse/figures/standing-numbers";
import { VERDICT_WORDS } from "@weighhouse/figures/verdict-marks";
import type { TexName } from "../layout";
import { predictedRange, toleranceWords } from "../prediction-words";
import { texText } from "./escape";

export type TexTable = { name: TexName; text: string };

/** A column: its head, its share of the line where its cells may break, and what is in it. */
type Column<Row> = { head: string; share?: number; cell: (row: Row) => string };

/**
 * The campaign's tables as they are printed: rounded numbers with their units, by booktabs' rules,
 * over as many pages as they need. Each is a document that compiles as it is; the lines between the
 * two comments go into a paper that loads booktabs and longtable.
 */
export function texTables(document: CampaignDocument, standings: Standings): TexTable[] {
  const titles = titlesOf(document);
  const caption = (what: string) => `${what} of “${document.campaign.title}”`;
  return [
    texTable("hypotheses", caption("Hypotheses"), hypothesisColumns(), document.hypotheses),
    texTable(
      "predictions",
      caption("Predictions"),
      predictionColumns(titles),
      document.hypotheses.flatMap((hypothesis) =>
        hypothesis.predictions.map((prediction) => ({ hypothesis: hypothesis.key, prediction })),
      ),
    ),
    texTable(
      "measurements",
      caption("Measurements"),
      measurementColumns(titles),
      document.measurements,
    ),
    texTable("verdicts", caption("Verdicts"), verdictColumns(titles), standings.verdicts),
    texTable("standings", caption("Standings"), standingColumns(titles), standings.hypotheses),
  ];
}

function texTable<Row>(
  name: TexName,
  caption: string,
  columns: Column<Row>[],
  rows: readonly Row[],
): TexTable {
  const shape = columns.map(({ share }) =>
    share === undefined ? "r" : `>{\\raggedright\\arraybackslash}p{${share}\\linewidth}`,
  );
  const lineOf = (cells: string[]) => `${cells.map(texText).join(" & ")} \\\\`;
  const head = lineOf(columns.map((column) => column.head));
  const text = [
    "\\documentclass[10pt,landscape]{article}",
    "\\usepackage[a4paper,margin=15mm]{geometry}",
    "\\usepackage{array,booktabs,longtable}",
    "\\setlength{\\tabcolsep}{5pt}",
    "\\begin{document}",
    "\\footnotesize",
    "% from here",
    `\\begin{longtable}{@{}${shape.join("")}@{}}`,
    `\\caption{${texText(caption)}}\\\\`,
    "\\toprule",
    head,
    "\\midrule",
    "\\endfirsthead",
    "\\toprule",
    head,
    "\\midrule",
    "\\endhead",
    "\\bottomrule",
    "\\endfoot",
    // A longtable without a row has no foot to end with.
    ...(rows.length === 0
      ? [`\\multicolumn{${columns.length}}{@{}l@{}}{none} \\\\`]
      : rows.map((row) => lineOf(columns.map(({ cell }) => cell(row))))),
    "\\end{longtable}",
    "% to here",
    "\\end{document}",
  ];
  return { name, text: `${text.join("\n")}\n` };
}

type Titles = {
  hypothesis: (key: string) => string;
  measurand: (key: string) => string;
  observable: (measurand: string) => Observable | undefined;
};

function titlesOf(document: CampaignDocument): Titles {
  const hypotheses = new Map(document.hypotheses.map(({ key, title }) => [key, title]));
  const parts = new Map([...document.measurands, ...document.derived].map((one) => [one.key, one]));
  const observables = new Map(document.observables.map((one) => [one.key, one]));
  return {
    hypothesis: (key) => hypotheses.get(key) ?? "none of these",
    measurand: (key) => parts.get(key)?.title ?? key,
    observable: (key) => observables.get(parts.get(key)?.observable ?? ""),
  };
}

function hypothesisColumns(): Column<CampaignDocument["hypotheses"][number]>[] {
  return [
    { head: "Key", share: 0.14, cell: ({ key }) => key },
    { head: "Hypothesis", share: 0.19, cell: ({ title }) => title },
    { head: "Statement", share: 0.32, cell: ({ statement }) => statement ?? ABSENT },
    { head: "Team", share: 0.1, cell: ({ team }) => team ?? ABSENT },
    { head: "Weight", cell: ({ weight }) => formatNumber(weight) },
    { head: "Predictions", cell: ({ predictions }) => formatCount(predictions.length) },
  ];
}

type PredictionRow = { hypothesis: string; prediction: Prediction };

function predictionColumns(titles: Titles): Column<PredictionRow>[] {
  const observable = ({ prediction }: PredictionRow) => titles.observable(prediction.measurand);
  return [
    { head: "Hypothesis", share: 0.18, cell: (row) => titles.hypothesis(row.hypothesis) },
    { head: "Quantity", share: 0.18, cell: (row) => titles.measurand(row.prediction.measurand) },
    {
      head: "Expected",
      share: 0.19,
      cell: (row) => predictedRange(row.prediction, observable(row)),
    },
    {
      head: "Theory error",
      share: 0.19,
      cell: (row) => toleranceWords(row.prediction, observable(row)),
    },
    { head: "Filed (UTC)", share: 0.15, cell: (row) => instantWords(row.prediction.registeredAt) },
  ];
}

function measurementColumns(titles: Titles): Column<Measurement>[] {
  return [
    { head: "Measurement", share: 0.22, cell: ({ id }) => id },
    { head: "Quantity", share: 0.19, cell: (row) => titles.measurand(row.measurand) },
    {
      head: "Result",
      share: 0.22,
      cell: (row) => resultWords(row, titles.observable(row.measurand)),
    },
    { head: "Observed (UTC)", share: 0.15, cell: (row) => instantWords(row.observedAt) },
    { head: "Set aside", share: 0.12, cell: (row) => row.setAside?.reason ?? "" },
  ];
}

function verdictColumns(titles: Titles): Column<Standings["verdicts"][number]>[] {
  return [
    { head: "Quantity", share: 0.19, cell: (row) => titles.measurand(row.measurand) },
    { head: "Hypothesis", share: 0.19, cell: (row) => titles.hypothesis(row.hypothesis) },
    {
      head: "Measured",
      share: 0.17,
      cell: (row) =>
        row.value === null
          ? ABSENT
          : formatMeasured(row.value, row.sd, observableOr(titles, row.measurand)),
    },
    { head: "Predicted", share: 0.12, cell: (row) => formatInterval(row.lower, row.upper) },
    { head: "Tension (sigma)", cell: (row) => formatTension(row.tension) },
    { head: "Verdict", share: 0.08, cell: (row) => VERDICT_WORDS[row.verdict] },
    { head: "Filed", share: 0.09, cell: (row) => ORDER_WORDS[row.order] },
  ];
}

const ORDER_WORDS: Record<Standings["verdicts"][number]["order"], string> = {
  "before-observation": "before observation",
  "before-posting": "before posting",
  after: "after data",
  undated: "undated",
};

function standingColumns(titles: Titles): Column<Standings["hypotheses"][number]>[] {
  return [
    { head: "Rank", cell: ({ rank }) => String(rank) },
    { head: "Hypothesis", share: 0.25, cell: ({ key }) => titles.hypothesis(key) },
    { head: "ln Z", cell: (row) => formatLnEvidence(row.lnEvidence, row.lnEvidenceError) },
    { head: "log10 B", cell: (row) => formatLog10B(row.log10BayesFactor) },
    { head: "Posterior", cell: ({ posterior }) => formatPosterior(posterior) },
    { head: "χ² / dof", cell: (row) => formatChiSquare(row.chiSquare, row.degreesOfFreedom) },
    { head: "p", cell: ({ pValue }) => formatP(pValue) },
    { head: "Compared", cell: ({ compared }) => formatCount(compared) },
    { head: "Silent", cell: ({ silent }) => formatCount(silent) },
    {
      head: "Pass, fail, undecided",
      cell: ({ verdicts }) => `${verdicts.pass}, ${verdicts.fail}, ${verdicts.undecided}`,
    },
  ];
}

function observableOr(titles: Titles, measurand: string): Pick<Observable, "scale" | "unit"> {
  return titles.observable(measurand) ?? { scale: "linear", unit: null };
}

/** A result as it was reported, in its own unit. */
function resultWords(row: Measurement, observable: Observable | undefined): string {
  const unit = row.unit ?? observable?.unit ?? null;
  const own = { scale: "linear", unit };
  if (row.occurred !== null) return row.occurred ? "occurred" : "did not occur";
  if (row.count !== null) return `${formatCount(row.count)} in ${formatNumber(row.exposure ?? 1)}`;
  if (row.value === null) return ABSENT;
  if (row.limit !== null) {
    const sure =
      row.confidence !== null
        ? `, ${formatNumber(100 * row.confidence, 4)} %`
        : row.sigmas !== null
          ? `, ${formatNumber(row.sigmas)} σ`
          : "";
    const sign = row.limit === "upper" || row.limit === "brighter" ? "<" : ">";
    return `${sign} ${formatMeasured(row.value, row.sd, own)}${sure}`;
  }
  if (row.plus !== null && row.minus !== null) {
    return `${formatNumber(row.value)} +${formatNumber(row.plus, 2)} −${formatNumber(row.minus, 2)}${unit === null || unit === "1" ? "" : ` ${unit}`}`;
  }
  if (row.sdDex !== null) return formatMeasured(row.value, row.sdDex, { scale: "log10", unit });
  return formatMeasured(row.value, row.sd, own);
}

function instantWords(instant: string | null): string {
  return instant === null ? ABSENT : instant.slice(0, 19).replace("T", " ");
}
