import type { Observable, Prediction } from "@weighhouse/campaign/document";
import type { VerdictRow } from "@weighhouse/campaign/standings";
import { formatNumber } from "@weighhouse/figures/numbers";
import { formatPosterior } from "@weighhouse/figures/standing-numbers";
import { KeptLink } from "@/look/kept-link";
import { predictionInWords, unitOf } from "@/campaign/plain-words";
import { HypothesisMark } from "@/look/hypothesis-mark";
import { Num } from "@/look/number";
import { Table } from "@/look/table";
import { VerdictCell } from "@/look/verdict-cell";
import { orderMeanings, orderWords } from "@/look/verdict-words";

export interface PredictionRow {
  hypothesis: { key: string; title: string; index: number };
  /** Null: the hypothesis is silent. */
  prediction: Prediction | null;
  verdict: { row: VerdictRow; at: string } | null;
}

/** What each hypothesis says of one quantity, and how it stands there. */
export function PredictionRows(props: {
  rows: readonly PredictionRow[];
  observable: Observable;
  base: string;
}) {
  return (
    <Table
      caption="Predictions of this quantity"
      stackBelow="broad"
      head={
        <tr>
          <th scope="col">Hypothesis</th>
          <th scope="col">Predicts</th>
          <th scope="col">
            Allows <span className="gloss">interval for the true value</span>
          </th>
          <th scope="col">
            Verdict <span className="gloss">tension in σ</span>
          </th>
          <th scope="col" className="number">
            Conformance
          </th>
          <th scope="col">Filed</th>
        </tr>
      }
    >
      {props.rows.map(({ hypothesis, prediction, verdict }) => (
        <tr key={hypothesis.key}>
          <th scope="row">
            <HypothesisMark index={hypothesis.index} />
            <KeptLink className="link" href={`${props.base}/hypotheses/${hypothesis.key}`}>
              {hypothesis.title}
            </KeptLink>
          </th>
          <td data-label="Predicts">
            {prediction ? (
              <span>
                {predictionInWords(prediction, props.observable)}
                {prediction.decisive ? <span className="text-rust"> decisive</span> : null}
              </span>
            ) : (
              <span className="text-quiet">silent: charged the no-model range</span>
            )}
          </td>
          <td data-label="Allows">
            {verdict ? <Interval verdict={verdict} unit={props.observable.unit} /> : null}
          </td>
          <td data-label="Verdict">
            {verdict ? <VerdictCell row={verdict.row} at={verdict.at} /> : null}
          </td>
          <td data-label="Conformance" className="number">
            {verdict && verdict.row.conformance !== null ? (
              <Num
                text={formatPosterior(verdict.row.conformance)}
                exact={verdict.row.conformance}
                at={`${verdict.at}/conformance`}
              />
            ) : null}
          </td>
          <td data-label="Filed">
            {verdict ? (
              <span title={orderMeanings[verdict.row.order]}>{orderWords[verdict.row.order]}</span>
            ) : null}
          </td>
        </tr>
      ))}
    </Table>
  );
}

function Interval(props: { verdict: { row: VerdictRow; at: string }; unit: string | null }) {
  const { row, at } = props.verdict;
  const end = (name: "lower" | "upper") => (
    <Num text={formatNumber(row[name] ?? 0, 4)} exact={row[name]} at={`${at}/${name}`} />
  );
  const unit = unitOf({ unit: props.unit });
  if (row.lower === null && row.upper === null) return <span className="text-quiet">any</span>;
  if (row.lower === null)
    return (
      <span>
        ≤ {end("upper")}
        {unit}
      </span>
    );
  if (row.upper === null)
    return (
      <span>
        ≥ {end("lower")}
        {unit}
      </span>
    );
  if (row.lower === row.upper)
    return (
      <span>
        {end("lower")}
        {unit} exactly
      </span>
    );
  return (
    <span>
      {end("lower")} to {end("upper")}
      {unit}
    </span>
  );
}
