import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurandStanding, Standings } from "@weighhouse/campaign/standings";
import { formatMeasured, formatNumber } from "@weighhouse/figures/numbers";
import { formatChiSquare, formatPosterior } from "@weighhouse/figures/standing-numbers";
import { cut, harmless, wrap, type Terminal } from "../terminal";
import { tableLines, tableWidth, type TableColumn } from "./table";

/** What each measurand's measurements say together. */
export function combinedLines(
  document: CampaignDocument,
  standings: Standings,
  terminal: Terminal,
): string[] {
  if (standings.measurands.length === 0) return ["No measurands"];
  const rows = standings.measurands.map((standing) => describe(document, standing));
  const column = (title: string, align: TableColumn["align"], cells: string[]) => ({
    title,
    align,
    cells,
  });
  const columns: TableColumn[] = [
    column(
      "",
      "left",
      rows.map(({ title }) => cut(title, 40)),
    ),
    column(
      "value",
      "left",
      rows.map(({ value }) => value),
    ),
    column(
      "χ² / dof",
      "decimal",
      rows.map(({ chiSquare }) => chiSquare),
    ),
    column(
      "Birge ratio",
      "decimal",
      rows.map(({ birgeRatio }) => birgeRatio),
    ),
    column(
      "measurements",
      "right",
      rows.map(({ measurements }) => measurements),
    ),
  ];
  const prose = rows.flatMap(({ thresholds }) => thresholds);
  if (tableWidth(columns) <= terminal.columns) {
    const table = tableLines(columns, (head) => terminal.style("dim", head));
    return [...table, ...prose.map((line) => wrap(line, terminal.proseColumns, "  "))];
  }
  return [...rows.map(asText), ...prose].map((line) => wrap(line, terminal.columns, "  "));
}

type Described = ReturnType<typeof describe>;

function asText(row: Described): string {
  return `${row.title}: ${row.value}, χ² / dof ${row.chiSquare}, Birge ratio ${row.birgeRatio}, measurements ${row.measurements}`;
}

function describe(document: CampaignDocument, standing: MeasurandStanding) {
  const declared = [...document.measurands, ...document.derived].find(
    ({ key }) => key === standing.key,
  );
  const observable = document.observables.find(({ key }) => key === declared?.observable);
  const { combined } = standing;
  const birge = combined?.birgeRatio ?? null;
  const title = harmless(declared?.title ?? standing.key);
  return {
    title,
    value:
      combined === null
        ? "not combined"
        : harmless(
            formatMeasured(combined.value, combined.sd, {
              scale: observable?.scale ?? "linear",
              unit: observable?.unit ?? null,
            }),
          ),
    chiSquare:
      combined === null ? "" : formatChiSquare(combined.chiSquare, combined.degreesOfFreedom ?? 0),
    birgeRatio: birge === null ? "" : formatNumber(birge, 3),
    measurements: String(standing.measurements),
    thresholds: standing.thresholds
      .filter(({ probabilityAbove }) => probabilityAbove !== null)
      .map(({ key, probabilityAbove }) => {
        const above = formatPosterior(probabilityAbove);
        return `${title}: above ${key} with probability ${above}`;
      }),
  };
}
