import type {
  CampaignDocument,
  Measurement,
  Observable,
  Prediction,
  Tolerance,
} from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import type { CsvCell } from "@weighhouse/tables/write-csv";
import type { TableName } from "./layout";
import type { TimelineRow } from "./timeline";

export type ArchiveTable = { name: TableName; header: string[]; rows: CsvCell[][] };

type Column<Row> = [title: string, cell: (row: Row) => CsvCell];

/**
 * The tables of an archive: campaign and standings as rows, each column's unit in its title.
 * Quantities of several units share a column; the unit then stands in the row (`in unit`).
 */
export function tablesOf(
  document: CampaignDocument,
  standings: Standings,
  timeline: readonly TimelineRow[],
): ArchiveTable[] {
  const units = unitsOf(document);
  return [
    table("hypotheses", hypothesisColumns, document.hypotheses),
    table("predictions", predictionColumns(units), predictionRows(document)),
    table("measurements", measurementColumns(units), document.measurements),
    table("verdicts", verdictColumns(units), standings.verdicts),
    table("standings", standingColumns, standings.hypotheses),
    table("timeline", timelineColumns, timeline),
  ];
}

function table<Row>(name: TableName, columns: Column<Row>[], rows: readonly Row[]): ArchiveTable {
  return {
    name,
    header: columns.map(([title]) => title),
    rows: rows.map((row) => columns.map(([, cell]) => cell(row))),
  };
}

const hypothesisColumns: Column<CampaignDocument["hypotheses"][number]>[] = [
  ["key", (row) => row.key],
  ["title", (row) => row.title],
  ["team", (row) => row.team],
  ["group", (row) => row.group],
  ["weight (1)", (row) => row.weight],
  ["registered at (UTC)", (row) => row.registeredAt],
  ["predictions (count)", (row) => row.predictions.length],
  ["withheld", (row) => row.withheld.join(" ")],
  ["statement", (row) => row.statement],
];

type PredictionRow = { hypothesis: string; prediction: Prediction };

function predictionRows(document: CampaignDocument): PredictionRow[] {
  return document.hypotheses.flatMap(({ key, predictions }) =>
    predictions.map((prediction) => ({ hypothesis: key, prediction })),
  );
}

function predictionColumns(units: Units): Column<PredictionRow>[] {
  const given = (field: string) => (row: PredictionRow) => fieldOf(row.prediction.tolerance, field);
  return [
    ["hypothesis", (row) => row.hypothesis],
    ["measurand", (row) => row.prediction.measurand],
    ["unit", (row) => units(row.prediction.measurand).unit],
    ["expected (in unit)", (row) => row.prediction.expected],
    ["tolerance", (row) => toleranceName(row.prediction)],
    ["tolerance sd (in sd unit)", given("sd")],
    ["sd unit", (row) => toleranceUnit(units, row.prediction)],
    ["lower (in unit)", given("lower")],
    ["upper (in unit)", given("upper")],
    ["bound (in unit)", given("bound")],
    ["plus (in sd unit)", given("plus")],
    ["minus (in sd unit)", given("minus")],
    ["mean (in unit)", given("mean")],
    ["probability (1)", (row) => row.prediction.probability],
    ["decisive", (row) => row.prediction.decisive],
    ["registered at (UTC)", (row) => row.prediction.registeredAt],
  ];
}

function measurementColumns(units: Units): Column<Measurement>[] {
  return [
    ["id", (row) => row.id],
    ["measurand", (row) => row.measurand],
    ["facility", (row) => row.facility],
    ["team", (row) => row.team],
    ["batch", (row) => row.batch],
    ["observed at (UTC)", (row) => row.observedAt],
    ["posted at (UTC)", (row) => row.postedAt],
    ["unit", (row) => row.unit ?? units(row.measurand).unit],
    ["value (in unit)", (row) => row.value],
    ["sd (in sd unit)", (row) => row.sd],
    ["plus (in sd unit)", (row) => row.plus],
    ["minus (in sd unit)", (row) => row.minus],
    ["sd (dex)", (row) => row.sdDex],
    ["sd unit", (row) => row.unit ?? units(row.measurand).unit],
    ["limit", (row) => row.limit],
    ["confidence (1)", (row) => row.confidence],
    ["sigmas (1)", (row) => row.sigmas],
    ["occurred", (row) => row.occurred],
    ["count (1)", (row) => row.count],
    ["exposure (1)", (row) => row.exposure],
    ["background (1)", (row) => row.background],
    ["shared errors (key:coefficient)", (row) => loadings(row)],
    ["same data", (row) => row.sameData],
    ["status", (row) => row.status],
    ["set aside", (row) => row.setAside?.reason ?? null],
    ["source", (row) => row.source],
  ];
}

function verdictColumns(units: Units): Column<Standings["verdicts"][number]>[] {
  return [
    ["hypothesis", (row) => row.hypothesis],
    ["measurand", (row) => row.measurand],
    ["verdict", (row) => row.verdict],
    ["order", (row) => row.order],
    ["conformance (1)", (row) => row.conformance],
    ["tension (1)", (row) => row.tension],
    ["unit", (row) => units(row.measurand).unit],
    ["value (in unit)", (row) => row.value],
    ["sd (in sd unit)", (row) => row.sd],
    ["sd unit", (row) => units(row.measurand).sdUnit],
    ["lower (in unit)", (row) => row.lower],
    ["upper (in unit)", (row) => row.upper],
    ["inflated", (row) => row.inflated],
    ["provisional", (row) => row.provisional],
  ];
}

const standingColumns: Column<Standings["hypotheses"][number]>[] = [
  ["rank", (row) => row.rank],
  ["hypothesis", (row) => row.key],
  ["ln evidence (nat)", (row) => row.lnEvidence],
  ["ln evidence error (nat)", (row) => row.lnEvidenceError],
  ["log10 Bayes factor against rank 1 (dex)", (row) => row.log10BayesFactor],
  ["posterior (1)", (row) => row.posterior],
  ["compared (count)", (row) => row.compared],
  ["silent (count)", (row) => row.silent],
  ["chi-square (1)", (row) => row.chiSquare],
  ["degrees of freedom (1)", (row) => row.degreesOfFreedom],
  ["p-value (1)", (row) => row.pValue],
  ["pass (count)", (row) => row.verdicts.pass],
  ["fail (count)", (row) => row.verdicts.fail],
  ["undecided (count)", (row) => row.verdicts.undecided],
  ["awaiting (count)", (row) => row.verdicts.awaiting],
  ["not measured (count)", (row) => row.verdicts.notMeasured],
  ["withheld (count)", (row) => row.verdicts.withheld],
  ["void (count)", (row) => row.verdicts.void],
  ["failed decisive predictions", (row) => row.failedDecisive.join(" ")],
];

const timelineColumns: Column<TimelineRow>[] = [
  ["entries (count)", (row) => row.size],
  ["at (UTC)", (row) => row.at],
  ["hypothesis", (row) => row.hypothesis],
  ["ln evidence (nat)", (row) => row.lnEvidence],
  ["ln evidence error (nat)", (row) => row.lnEvidenceError],
];

/** A measurand's unit, and the unit of its sds: dex on a log10 scale. */
type Units = (measurand: string) => { unit: string | null; sdUnit: string | null };

function unitsOf(document: CampaignDocument): Units {
  const observables = new Map(document.observables.map((one) => [one.key, one]));
  const observableOf = new Map<string, Observable | undefined>(
    [...document.measurands, ...document.derived].map(({ key, observable }) => [
      key,
      observables.get(observable),
    ]),
  );
  return (measurand) => {
    const observable = observableOf.get(measurand);
    const unit = observable?.unit ?? null;
    return { unit, sdUnit: observable?.scale === "log10" ? "dex" : unit };
  };
}

function toleranceName({ expected, tolerance }: Prediction): string | null {
  if (tolerance !== null) return tolerance.family;
  return expected === null ? null : "exact";
}

function toleranceUnit(units: Units, { measurand, tolerance }: Prediction): string | null {
  if (tolerance?.family === "normal" && tolerance.relative) return "of expected";
  return units(measurand).sdUnit;
}

function fieldOf(tolerance: Tolerance | null, field: string): number | null {
  const value = tolerance === null ? undefined : (tolerance as Record<string, unknown>)[field];
  return typeof value === "number" ? value : null;
}

function loadings({ shared }: Measurement): string | null {
  if (shared.length === 0) return null;
  return shared.map(({ error, coefficient }) => `${error}:${coefficient}`).join("; ");
}
