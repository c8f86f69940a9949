import { formatInterval } from "@weighhouse/figures/numbers";
import type { PredictionPreview } from "@weighhouse/engine/prediction-preview";
import { layOutBand, type Span } from "./band-layout";
import { unitAfter, type Quantity } from "./quantity";

const height = 74;

/**
 * The prediction's band against the no-model range, in per cent of whatever width there is. The
 * range is a plain bar, the band an outlined box over it, the expected value a stroke, and what a
 * measurement must read to pass a bracket below.
 */
export function BandFigure(props: { quantity: Quantity; preview: PredictionPreview }) {
  const { quantity, preview } = props;
  const reference = closed(preview.reference);
  const band = closed(preview.interval);
  if (reference === null || band === null) return null;
  const layout = layOutBand({
    scale: quantity.scale === "log10" ? "log10" : "linear",
    reference,
    expected: preview.expected,
    band,
    passes: preview.passes === null ? null : closed(preview.passes),
  });
  return (
    <figure className="mb-2">
      <svg
        role="img"
        width="100%"
        height={height}
        aria-label={`Predicted ${formatInterval(band.lower, band.upper)}${unitAfter(quantity)} within a no-model range of ${formatInterval(reference.lower, reference.upper)}${unitAfter(quantity)}`}
      >
        <text x="0" y="12" className="quiet">
          {formatInterval(reference.lower, reference.lower)}
        </text>
        <text x="100%" y="12" textAnchor="end" className="quiet">
          {formatInterval(reference.upper, reference.upper)}
        </text>
        <Bar span={layout.reference} y={26} height={14} fill="var(--rule)" />
        <Bar
          span={layout.band}
          y={20}
          height={26}
          fill="color-mix(in srgb, var(--brass) 24%, transparent)"
          stroke="var(--brass)"
        />
        <line
          x1={`${layout.expected}%`}
          x2={`${layout.expected}%`}
          y1={16}
          y2={50}
          stroke="var(--ink)"
          strokeWidth={2}
        />
        {layout.passes === null ? null : (
          <Bar span={layout.passes} y={58} height={5} fill="var(--fir)" />
        )}
      </svg>
      <figcaption className="flex flex-wrap gap-x-4 text-[13px] text-quiet">
        <Sign color="var(--rule)">no-model range</Sign>
        <Sign color="var(--brass)">predicted</Sign>
        <Sign color="var(--ink)">expected</Sign>
        {layout.passes === null ? null : <Sign color="var(--fir)">would pass</Sign>}
      </figcaption>
    </figure>
  );
}

function Bar(props: { span: Span; y: number; height: number; fill: string; stroke?: string }) {
  return (
    <rect
      x={`${props.span.left}%`}
      width={`${Math.max(props.span.width, 0.4)}%`}
      y={props.y}
      height={props.height}
      fill={props.fill}
      stroke={props.stroke}
      strokeWidth={props.stroke ? 1.5 : undefined}
    />
  );
}

function Sign({ color, children }: { color: string; children: string }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <span aria-hidden="true" className="inline-block h-1 w-4" style={{ background: color }} />
      {children}
    </span>
  );
}

function closed(range: { lower: number | null; upper: number | null }) {
  return range.lower === null || range.upper === null
    ? null
    : { lower: range.lower, upper: range.upper };
}
