"use client";

import { formatNumber, formatWithUncertainty } from "@weighhouse/figures/numbers";
import { formatTime } from "@weighhouse/figures/times";
import {
  CartesianGrid,
  ErrorBar,
  ReferenceArea,
  ReferenceLine,
  ResponsiveContainer,
  Scatter,
  ScatterChart,
  Tooltip,
  XAxis,
  YAxis,
} from "recharts";
import type { TooltipContentProps } from "recharts";
import { linearTicks, logTicks, timeTicks } from "@/look/axis-ticks";
import { inkOf } from "@/look/hypothesis-mark";
import { unitOf } from "@/campaign/plain-words";
import type { MeasurandPlotData, PlotBand, PlotPoint } from "./plot-data";
import type { PlotCurve } from "./predicted-curves";

/** Share of the width kept at the right for the predictions, a lane each. */
const LANES = 0.3;

/**
 * Measurements with their error bars against time; at the right a lane for each hypothesis with
 * what it allows, drawn faintly across. Behind all, the no-model range; in brass what was measured
 * taken together.
 */
export function MeasurandPlot(props: { data: MeasurandPlotData; curves: readonly PlotCurve[] }) {
  const { data, curves } = props;
  const { x, y } = data;
  const width = x[1] - x[0];
  const end = data.bands.length === 0 ? x[1] : x[1] + width * (LANES / (1 - LANES));
  const along = alongTicks(data);
  // Many bands over one another would turn to mud.
  const faint = Math.min(0.1, 0.4 / data.bands.length);
  return (
    <div className="needs-script h-80 w-full">
      <ResponsiveContainer width="100%" height="100%">
        <ScatterChart margin={{ top: 8, right: 4, bottom: 4, left: 0 }} accessibilityLayer>
          {data.reference ? (
            <ReferenceArea
              y1={Math.max(data.reference.low, y[0])}
              y2={Math.min(data.reference.high, y[1])}
              ifOverflow="hidden"
              fill="var(--well)"
              fillOpacity={1}
              stroke="none"
            />
          ) : null}
          <CartesianGrid stroke="var(--rule)" vertical={false} />
          {data.bands.map((band) => (
            <ReferenceArea
              key={band.key}
              {...clipped(band, y)}
              ifOverflow="hidden"
              fill={inkOf(band.index)}
              fillOpacity={band.lower === band.upper ? 0.5 : faint}
              stroke="none"
            />
          ))}
          {data.bands.map((band, lane) => (
            <ReferenceArea
              key={`${band.key} lane`}
              {...clipped(band, y)}
              x1={x[1] + ((end - x[1]) * (lane + 0.2)) / data.bands.length}
              x2={x[1] + ((end - x[1]) * (lane + 0.8)) / data.bands.length}
              ifOverflow="hidden"
              fill={inkOf(band.index)}
              fillOpacity={0.55}
              stroke={inkOf(band.index)}
              strokeWidth={2}
            />
          ))}
          {data.combined ? (
            <ReferenceArea
              y1={data.combined.low}
              y2={data.combined.high}
              x1={x[0]}
              x2={x[1]}
              ifOverflow="hidden"
              fill="var(--brass)"
              fillOpacity={0.22}
              stroke="none"
            />
          ) : null}
          {data.combined ? (
            <ReferenceLine y={data.combined.value} stroke="var(--brass)" strokeWidth={1.6} />
          ) : null}
          <ReferenceLine x={x[1]} stroke="var(--edge)" />
          <XAxis
            dataKey="x"
            type="number"
            domain={[x[0], end]}
            ticks={along.ticks}
            tickFormatter={along.text}
            tick={{ fill: "var(--quiet)", fontSize: 12.5 }}
            stroke="var(--edge)"
            minTickGap={20}
          />
          <YAxis
            type="number"
            dataKey="value"
            scale={data.log ? "log" : "linear"}
            domain={[...y]}
            allowDataOverflow
            width={64}
            ticks={data.log ? logTicks(...y) : linearTicks(...y)}
            tickFormatter={(value: number) => formatNumber(value, 6)}
            tick={{ fill: "var(--quiet)", fontSize: 12.5 }}
            stroke="var(--edge)"
          />
          <Tooltip
            content={<Tip data={data} />}
            cursor={{ stroke: "var(--edge)" }}
            isAnimationActive={false}
          />
          {data.points.length > 0 ? null : (
            // Without a point in it the chart has no axes, and draws no band either.
            <Scatter
              data={[
                { x: x[0], value: y[0] },
                { x: x[1], value: y[1] },
              ]}
              shape={NoMark}
              tooltipType="none"
              isAnimationActive={false}
            />
          )}
          {curves.map((curve) => (
            <Scatter
              key={`${curve.key} curve`}
              data={curve.points}
              line={{ stroke: inkOf(curve.index), strokeWidth: 2 }}
              shape={NoMark}
              tooltipType="none"
              isAnimationActive={false}
            />
          ))}
          <Scatter data={data.points} shape={Point} isAnimationActive={false}>
            <ErrorBar
              dataKey="error"
              direction="y"
              isAnimationActive={false}
              stroke="var(--ink)"
              strokeWidth={1.5}
              width={4}
            />
          </Scatter>
        </ScatterChart>
      </ResponsiveContainer>
    </div>
  );
}

function alongTicks({ along, points, x }: MeasurandPlotData) {
  if (along.by === "time") return timeTicks(x[0], x[1], 3);
  const ticks = along.by === "order" ? points.map((point) => point.x) : linearTicks(x[0], x[1]);
  return { ticks, text: (value: number) => formatNumber(value, 6) };
}

function NoMark() {
  return <g />;
}

/** An unbounded end runs to the plot's edge; one number drawn as a hair, so that it is seen. */
function clipped(band: PlotBand, y: readonly [number, number]): { y1: number; y2: number } {
  const [lower, upper] = [band.lower ?? y[0], band.upper ?? y[1]];
  const hair = (y[1] - y[0]) * 0.003;
  return lower === upper
    ? { y1: lower - hair, y2: upper + hair }
    : { y1: Math.max(lower, y[0]), y2: Math.min(upper, y[1]) };
}

/** A dot; hollow when set aside; an arrow from a limit in the direction that it allows. */
function Point(props: { cx?: number; cy?: number; payload?: PlotPoint }) {
  const { cx = 0, cy = 0, payload } = props;
  if (payload?.limit) {
    const down = payload.limit === "upper" || payload.limit === "brighter" ? 1 : -1;
    return (
      <path
        d={`M${cx - 6} ${cy}h12M${cx} ${cy}v${18 * down}l-4 ${-5 * down}m4 ${5 * down}l4 ${-5 * down}`}
        fill="none"
        stroke="var(--ink)"
        strokeWidth="1.6"
      />
    );
  }
  return (
    <circle
      cx={cx}
      cy={cy}
      r="4.2"
      fill={payload?.counted === false ? "var(--sheet)" : "var(--ink)"}
      stroke="var(--ink)"
      strokeWidth="1.5"
    />
  );
}

function Tip(props: Partial<TooltipContentProps> & { data: MeasurandPlotData }) {
  const point = props.payload?.[0]?.payload as PlotPoint | undefined;
  if (!props.active || point === undefined) return null;
  const [down, up] = point.error;
  const symmetric = Math.abs(up - down) <= 1e-9 * Math.abs(up + down);
  const unit = unitOf(props.data);
  return (
    <div className="rounded-sheet border border-edge bg-sheet px-3 py-2 text-[13px]">
      <p className="font-semibold">
        {symmetric
          ? formatWithUncertainty(point.value, up)
          : `${formatNumber(point.value)} +${formatNumber(up, 2)} −${formatNumber(down, 2)}`}
        {unit}
      </p>
      <p>{point.id}</p>
      <p className="text-quiet">
        {point.facility ? `${point.facility}, ` : ""}
        {placeWords(props.data, point.x)}
        {point.counted ? "" : ", set aside"}
      </p>
    </div>
  );
}

function placeWords({ along }: MeasurandPlotData, x: number): string {
  if (along.by === "time") return formatTime(new Date(x).toISOString());
  if (along.by === "order") return `number ${x}`;
  return `${along.title} ${formatNumber(x)}${unitOf(along)}`;
}
