import { HypothesisMark } from "@/look/hypothesis-mark";
import type { MeasurandPlotData } from "./plot-data";
import type { PlotCurve } from "./predicted-curves";

/** What is what in the plot, in the order of its lanes. */
export function PlotLegend(props: { data: MeasurandPlotData; curves: readonly PlotCurve[] }) {
  const { data, curves } = props;
  return (
    <div className="mt-1 flex flex-wrap gap-x-6 gap-y-1 text-[13.5px]">
      {data.bands.length === 0 ? null : (
        <ul className="flex list-none flex-wrap gap-x-5 gap-y-1" aria-label="Lanes at the right">
          {data.bands.map((band) => (
            <li key={band.key}>
              <HypothesisMark index={band.index} />
              {band.title}
            </li>
          ))}
        </ul>
      )}
      {curves.length === 0 ? null : (
        <ul className="flex list-none flex-wrap gap-x-5 gap-y-1" aria-label="Lines">
          {curves.map((curve) => (
            <li key={curve.key}>
              <HypothesisMark index={curve.index} />
              {curve.title}, at its parameters’ means
            </li>
          ))}
        </ul>
      )}
      {data.combined ? (
        <span>
          <Swatch fill="var(--brass)" /> measured, taken together
        </span>
      ) : null}
      {data.reference ? (
        <span>
          <Swatch fill="var(--well)" /> no-model range (reference)
        </span>
      ) : null}
    </div>
  );
}

function Swatch({ fill }: { fill: string }) {
  return (
    <svg
      viewBox="0 0 14 10"
      width="14"
      height="10"
      aria-hidden="true"
      className="mr-1.5 inline-block"
    >
      <rect width="14" height="10" fill={fill} stroke="var(--edge)" />
    </svg>
  );
}
