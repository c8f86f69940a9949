import { formatTension } from "@weighhouse/figures/standing-numbers";
import { formatWindow } from "@weighhouse/figures/times";
import { KeptLink } from "@/look/kept-link";
import { predictionInWords } from "@/campaign/plain-words";
import { Measured } from "@/look/measured";
import { tailOf } from "@/look/number";
import { Table } from "@/look/table";
import { Time } from "@/look/time";
import { VerdictCell } from "@/look/verdict-cell";
import { orderMeanings, orderWords } from "@/look/verdict-words";
import type { FiledPrediction } from "./filed-rows";
import { Pull } from "./pull";

/** A hypothesis's predictions with what was measured, the pull of each, and when it was filed. */
export function FiledPredictions(props: { rows: readonly FiledPrediction[]; base: string }) {
  const tail = tailOf(
    props.rows.map(({ verdict }) =>
      verdict && verdict.row.tension !== null ? formatTension(verdict.row.tension) : null,
    ),
  );
  return (
    <Table
      caption="Predictions"
      stackBelow="broad"
      head={
        <tr>
          <th scope="col">Quantity</th>
          <th scope="col">
            Predicts <span className="gloss">with its theory error</span>
          </th>
          <th scope="col">
            Measured <span className="gloss">together</span>
          </th>
          <th scope="col">
            Pull <span className="gloss">σ, to ±5</span>
          </th>
          <th scope="col">Verdict</th>
          <th scope="col">Filed</th>
        </tr>
      }
    >
      {props.rows.map((row) => (
        <tr key={row.measurand.key}>
          <th scope="row">
            <KeptLink className="link" href={`${props.base}/quantities/${row.measurand.key}`}>
              {row.measurand.title}
            </KeptLink>
            {row.prediction.decisive ? <span className="ml-2 text-rust">decisive</span> : null}
            <span className="block text-[13px] text-quiet">
              {formatWindow(row.measurand.window.from, row.measurand.window.to)}
            </span>
          </th>
          <td data-label="Predicts">{predictionInWords(row.prediction, row.observable)}</td>
          <td data-label="Measured">
            {row.combined ? (
              <Measured
                value={row.combined.value.value}
                sd={row.combined.value.sd}
                scale={row.observable.scale}
                unit={row.observable.unit}
                at={row.combined.at}
              />
            ) : (
              <span className="text-quiet">not yet</span>
            )}
          </td>
          <td data-label="Pull">
            {row.verdict && row.verdict.row.tension !== null ? (
              <Pull tension={row.verdict.row.tension} />
            ) : null}
          </td>
          <td data-label="Verdict">
            {row.verdict ? (
              <VerdictCell row={row.verdict.row} at={row.verdict.at} tail={tail} />
            ) : null}
          </td>
          <td data-label="Filed">
            <span>
              {row.verdict ? (
                <span title={orderMeanings[row.verdict.row.order]}>
                  {orderWords[row.verdict.row.order]}
                </span>
              ) : null}
              {row.filedAt ? (
                <span className="block text-[13px] text-quiet">
                  <Time at={row.filedAt} />
                </span>
              ) : null}
            </span>
          </td>
        </tr>
      ))}
    </Table>
  );
}
