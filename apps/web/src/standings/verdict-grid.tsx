import { formatTension } from "@weighhouse/figures/standing-numbers";
import { formatWindow } from "@weighhouse/figures/times";
import { KeptLink } from "@/look/kept-link";
import { HypothesisMark } from "@/look/hypothesis-mark";
import { Measured } from "@/look/measured";
import { tailOf } from "@/look/number";
import { Table } from "@/look/table";
import { VerdictCell } from "@/look/verdict-cell";
import type { GridRow, RankedHypothesis } from "./table-rows";

/** Measurands by hypotheses: in each cell the tension in sigma, our mark and the verdict's word. */
export function VerdictGrid(props: {
  rows: GridRow[];
  hypotheses: RankedHypothesis[];
  base: string;
}) {
  const tail = tailOf(
    props.rows.flatMap((row) =>
      row.cells.map((cell) =>
        cell === null || cell.row.tension === null ? null : formatTension(cell.row.tension),
      ),
    ),
  );
  return (
    <Table
      caption="Verdicts, a row for each quantity, a column for each hypothesis"
      stackBelow={stackBelow(props.hypotheses.length)}
      head={
        <tr>
          <th scope="col">Quantity, in window order</th>
          <th scope="col">
            Measured <span className="gloss">combined</span>
          </th>
          {props.hypotheses.map((hypothesis) => (
            <th scope="col" key={hypothesis.key} className="max-w-[14em]">
              <HypothesisMark index={hypothesis.index} />
              {hypothesis.title}
            </th>
          ))}
        </tr>
      }
    >
      {props.rows.map((row) => (
        <tr key={row.measurand.key} data-measurand={row.measurand.key}>
          <th scope="row" className="min-w-[12em]">
            <KeptLink href={`${props.base}/quantities/${row.measurand.key}`} className="link">
              {row.measurand.title}
            </KeptLink>
            <div className="text-[13px] text-quiet">
              {formatWindow(row.measurand.window.from, row.measurand.window.to)}
            </div>
          </th>
          <td data-label="Measured, combined">
            <MeasuredCell row={row} />
          </td>
          {row.cells.map((cell, column) => (
            <td
              key={props.hypotheses[column]?.key ?? column}
              data-silent={cell === null ? true : undefined}
              data-label={props.hypotheses[column]?.title}
            >
              <VerdictCell row={cell?.row ?? null} at={cell?.at} tail={tail} />
            </td>
          ))}
          <SilentTogether row={row} hypotheses={props.hypotheses} />
        </tr>
      ))}
    </Table>
  );
}

/** Where rows are stacked, one line names all who are silent on the quantity. */
function SilentTogether(props: { row: GridRow; hypotheses: RankedHypothesis[] }) {
  const silent = props.hypotheses.filter((_, column) => props.row.cells[column] === null);
  return silent.length === 0 ? null : (
    <td className="only-stacked text-[13.5px] text-quiet" data-label="Silent">
      {silent.map(({ title }) => title).join("; ")}
    </td>
  );
}

/** A column for each hypothesis takes about 145 px, the two before them 350. */
function stackBelow(columns: number): "middle" | "broad" | "wide" | "always" {
  if (columns <= 3) return "middle";
  if (columns === 4) return "broad";
  return columns <= 6 ? "wide" : "always";
}

function MeasuredCell({ row }: { row: GridRow }) {
  if (row.combined === null || row.place === null) {
    return (
      <span className="text-quiet">
        {row.measurements > 0 ? `${row.measurements} measured, no one value` : "not yet"}
      </span>
    );
  }
  return (
    <Measured
      value={row.combined.value}
      sd={row.combined.sd}
      scale={row.observable?.scale ?? "linear"}
      unit={row.observable?.unit ?? null}
      at={`/measurands/${row.place}/combined`}
    />
  );
}
