"use client";

import { formatNumber } from "@weighhouse/figures/numbers";
import { formatLnEvidence } from "@weighhouse/figures/standing-numbers";
import { formatTime } from "@weighhouse/figures/times";
import { useMemo, useState } from "react";
import {
  CartesianGrid,
  Line,
  LineChart,
  ResponsiveContainer,
  Tooltip,
  XAxis,
  YAxis,
} from "recharts";
import type { TooltipContentProps } from "recharts";
import { linearTicks, timeTicks } from "@/look/axis-ticks";
import { dashOf, inkOf } from "@/look/hypothesis-mark";
import type { TimelineRow } from "./timeline-rows";

interface Series {
  key: string;
  title: string;
  /** Place in the document; null for no model, a thin dotted line. */
  index: number | null;
}

function lineOf({ index }: Series): { ink: string; dash: string | undefined } {
  return index === null
    ? { ink: "var(--quiet)", dash: "1 4" }
    : { ink: inkOf(index), dash: dashOf(index) };
}

/** ln evidence over time, in steps at each transaction that moved it. */
export function TimelineChart(props: { rows: TimelineRow[]; series: Series[] }) {
  const [axis, setAxis] = useState<"time" | "entry">("time");
  const rows = useMemo(
    () =>
      props.rows.map((row) => ({
        ...row,
        x: axis === "time" ? row.time : row.size - 1,
      })),
    [props.rows, axis],
  );
  const [first, last] = [rows[0]?.x ?? 0, rows.at(-1)?.x ?? 0];
  const along =
    axis === "time"
      ? timeTicks(first, Math.max(last, first + 1), 6)
      : { ticks: linearTicks(first, last).filter(Number.isInteger), text: String };
  return (
    <div className="needs-script">
      <fieldset className="no-print mb-1 flex flex-wrap gap-4 text-[14px] text-quiet">
        <legend className="sr-only">Along the axis</legend>
        {(["time", "entry"] as const).map((each) => (
          <label key={each} className="inline-flex items-center gap-1.5">
            <input
              type="radio"
              name="timeline-axis"
              className="accent-brass"
              checked={axis === each}
              onChange={() => setAxis(each)}
            />
            {each === "time" ? "against time" : "against ledger entry"}
          </label>
        ))}
      </fieldset>
      <div className="h-72 w-full">
        <ResponsiveContainer width="100%" height="100%">
          <LineChart
            data={rows}
            margin={{ top: 8, right: 12, bottom: 4, left: 0 }}
            accessibilityLayer
          >
            <CartesianGrid stroke="var(--rule)" vertical={false} />
            <XAxis
              dataKey="x"
              type="number"
              domain={["dataMin", "dataMax"]}
              ticks={along.ticks}
              tickFormatter={along.text}
              tick={{ fill: "var(--quiet)", fontSize: 12.5 }}
              stroke="var(--edge)"
              minTickGap={24}
            />
            <YAxis
              width={62}
              domain={["auto", "auto"]}
              tickFormatter={(value: number) => formatNumber(value, 4)}
              tick={{ fill: "var(--quiet)", fontSize: 12.5 }}
              stroke="var(--edge)"
            />
            <Tooltip
              content={<Tip series={props.series} />}
              cursor={{ stroke: "var(--edge)" }}
              isAnimationActive={false}
            />
            {props.series.map((each) => (
              <Line
                key={each.key}
                type="stepAfter"
                dataKey={(row: TimelineRow) => row.values[each.key] ?? null}
                name={each.title}
                stroke={lineOf(each).ink}
                strokeDasharray={lineOf(each).dash}
                strokeWidth={2}
                dot={rows.length < 40 ? { r: 2.5, fill: lineOf(each).ink, strokeWidth: 0 } : false}
                isAnimationActive={false}
                connectNulls={false}
              />
            ))}
          </LineChart>
        </ResponsiveContainer>
      </div>
      <ul className="mt-2 flex list-none flex-wrap gap-x-5 gap-y-1 text-[13.5px]">
        {props.series.map((each) => (
          <li key={each.key} className="inline-flex items-center gap-2">
            <svg viewBox="0 0 30 8" width="30" height="8" aria-hidden="true">
              <line
                x1="0"
                y1="4"
                x2="30"
                y2="4"
                stroke={lineOf(each).ink}
                strokeWidth="2"
                strokeDasharray={lineOf(each).dash}
              />
            </svg>
            {each.title}
          </li>
        ))}
      </ul>
    </div>
  );
}

function Tip(props: Partial<TooltipContentProps> & { series: Series[] }) {
  const row = props.payload?.[0]?.payload as TimelineRow | undefined;
  if (!props.active || row === undefined) return null;
  return (
    <div className="max-w-80 rounded-sheet border border-edge bg-sheet px-3 py-2 text-[13px]">
      <p>
        entry {row.size - 1}, {formatTime(row.at)}
      </p>
      <p className="text-quiet">{row.movedBy}</p>
      <table className="mt-1 w-full">
        <tbody>
          {props.series.map((each) => (
            <tr key={each.key}>
              <th
                scope="row"
                className="pr-3 text-left font-normal"
                style={{ color: lineOf(each).ink }}
              >
                {each.title}
              </th>
              <td className="text-right">
                {row.values[each.key] === undefined
                  ? "–"
                  : formatLnEvidence(row.values[each.key] ?? null)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
