import type { TimelineStep } from "@weighhouse/store/standings";
import { formatLnEvidence } from "@weighhouse/figures/standing-numbers";
import { timelineSvg } from "@weighhouse/figures/timeline-svg";
import { FigureWithoutScript } from "@/look/figure-without-script";
import { Section } from "@/look/section";
import { Table } from "@/look/table";
import { Time } from "@/look/time";
import type { RankedHypothesis } from "./table-rows";
import { TimelineChart } from "./timeline-chart";
import { timelineRows } from "./timeline-rows";
import type { TimelineRow } from "./timeline-rows";

/** ln evidence over time: the chart, and the same as a table for those who read or hear it. */
export function TimelineSection(props: {
  steps: readonly TimelineStep[];
  now: { size: number; at: string };
  hypotheses: RankedHypothesis[];
}) {
  const rows = timelineRows(props.steps, props.now);
  return (
    <Section title="ln evidence over time" gloss="in steps, at what moved it" id="timeline">
      {rows.length > 0 ? (
        <>
          <FigureWithoutScript
            label="ln evidence over time; the same stands in the table below"
            svg={timelineSvg(
              {
                hypotheses: props.hypotheses.map(({ key, title, index }) => ({
                  key,
                  title,
                  place: index,
                })),
                points: rows.map(({ at, values }) => ({ at, lnEvidence: values })),
              },
              { widthPx: 900 },
            )}
          />
          <TimelineChart
            rows={rows}
            series={[
              ...props.hypotheses.map(({ key, title, index }) => ({ key, title, index })),
              { key: "noModel", title: "no model", index: null },
            ]}
          />
          <details className="mt-3 text-[14px]">
            <summary className="cursor-pointer text-quiet">The same as a table</summary>
            <Steps rows={rows} hypotheses={props.hypotheses} />
          </details>
        </>
      ) : (
        <p className="text-quiet">
          It begins with the first measurement; each one after that makes a step.
        </p>
      )}
    </Section>
  );
}

function Steps({ rows, hypotheses }: { rows: TimelineRow[]; hypotheses: RankedHypothesis[] }) {
  return (
    <Table
      caption="ln evidence after each move, the newest first"
      stackBelow={hypotheses.length > 5 ? "always" : "broad"}
      head={
        <tr>
          <th scope="col">Entry</th>
          <th scope="col">Time</th>
          <th scope="col">Moved by</th>
          {hypotheses.map((each) => (
            <th scope="col" key={each.key} className="number">
              {each.title}
            </th>
          ))}
        </tr>
      }
    >
      {rows.toReversed().map((row) => (
        <tr key={row.size}>
          <th scope="row">{row.size - 1}</th>
          <td data-label="Time">
            <Time at={row.at} />
          </td>
          <td data-label="Moved by">{row.movedBy}</td>
          {hypotheses.map((each) => (
            <td className="number" key={each.key} data-label={each.title}>
              {row.values[each.key] === undefined
                ? "–"
                : formatLnEvidence(row.values[each.key] ?? null)}
            </td>
          ))}
        </tr>
      ))}
    </Table>
  );
}
