import type { BeamBand, BeamLayout, BeamMark, BeamTick } from "@weighhouse/figures/beam";
import type { PlacedText, Point } from "@weighhouse/figures/boxes";
import { useId } from "react";
import { inkOf } from "@/look/hypothesis-mark";
import type { BeamView, MarkedNumber } from "./beam-input";

/** One layout of the beam as SVG; all its places come from `figures`, as in the archive. */
export function BeamDrawing(props: { layout: BeamLayout; view: BeamView; label: string }) {
  const { layout } = props;
  const hatch = useId();
  return (
    <svg
      viewBox={`0 0 ${layout.width} ${layout.height}`}
      width={layout.width}
      height={layout.height}
      className="block h-auto w-full"
      role="img"
      aria-label={props.label}
    >
      <defs>
        <pattern
          id={hatch}
          width="6"
          height="6"
          patternUnits="userSpaceOnUse"
          patternTransform="rotate(45)"
        >
          <line x1="0" y1="0" x2="0" y2="6" stroke="var(--rule)" strokeWidth="2" />
        </pattern>
      </defs>
      {layout.bands.map((band, depth) => (
        <Band key={band.from} band={band} depth={depth} />
      ))}
      {layout.marks.map((mark) => (
        <Stem key={mark.key} mark={mark} />
      ))}
      <Rod {...layout.beam} />
      {layout.beyond ? (
        <line {...ends(layout.beyond)} stroke="var(--ink)" strokeWidth="2" strokeDasharray="5 4" />
      ) : null}
      {layout.ticks.map((tick) => (
        <Tick key={tick.value} tick={tick} />
      ))}
      {layout.marks.map((mark) =>
        mark.role === "no-model" ? (
          <NoModel key={mark.key} mark={mark} number={props.view.noModel} />
        ) : (
          <Hung
            key={mark.key}
            mark={mark}
            place={props.view.marks[mark.key]}
            hatch={silentIn(props.view, mark) ? `url(#${hatch})` : null}
          />
        ),
      )}
      {layout.statement ? <Statement {...layout.statement} /> : null}
      {layout.legend.map((line) => (
        <Line key={line.text} line={line} quiet />
      ))}
    </svg>
  );
}

function Rod(beam: { from: Point; to: Point }) {
  return (
    <g>
      <line {...ends(beam)} stroke="var(--ink)" strokeWidth="7" />
      <line {...ends(beam)} stroke="var(--brass)" strokeWidth="1.6" />
    </g>
  );
}

function Band({ band, depth }: { band: BeamBand; depth: number }) {
  return (
    <g>
      <rect {...band.box} fill="var(--rule)" opacity={0.14 + 0.14 * depth} />
      {band.label ? <Line line={band.label} quiet /> : null}
    </g>
  );
}

function Tick({ tick }: { tick: BeamTick }) {
  return (
    <g>
      <line {...ends(tick)} stroke="var(--ink)" strokeWidth={tick.value === 0 ? 3 : 1} />
      {tick.label ? <Line line={tick.label} quiet /> : null}
    </g>
  );
}

function Stem({ mark }: { mark: BeamMark }) {
  const points = mark.stem.map(({ x, y }) => `${x},${y}`).join(" ");
  return <polyline points={points} fill="none" stroke="var(--edge)" />;
}

function Hung(props: {
  mark: BeamMark;
  place: BeamView["marks"][string] | undefined;
  hatch: string | null;
}) {
  const { mark, place } = props;
  const ink = inkOf(place?.index ?? mark.index);
  return (
    <g>
      <rect {...mark.spot} fill={ink} stroke="var(--sheet)" strokeWidth="1" />
      <rect {...mark.label} rx="2" fill="var(--sheet)" stroke={ink} strokeWidth="1.8" />
      {props.hatch ? <rect {...mark.label} rx="2" fill={props.hatch} opacity="0.55" /> : null}
      {mark.lines.map((line) => (
        <Line
          key={`${line.x} ${line.y}`}
          line={line}
          number={line.bold ? undefined : place}
          quiet={!line.bold}
        />
      ))}
    </g>
  );
}

/** The no-model evidence: a plain lozenge on the beam. */
function NoModel({ mark, number }: { mark: BeamMark; number: MarkedNumber }) {
  const [x, y] = [mark.spot.x + mark.spot.width / 2, mark.spot.y + mark.spot.height / 2];
  return (
    <g>
      <rect {...mark.label} rx="2" fill="var(--sheet)" stroke="var(--rule)" />
      <path
        d={`M${x} ${y - 7}l7 7-7 7-7-7z`}
        fill="var(--sheet)"
        stroke="var(--ink)"
        strokeWidth="1.4"
      />
      {mark.lines.map((line) => (
        <Line key={`${line.x} ${line.y}`} line={{ ...line, bold: false }} number={number} quiet />
      ))}
    </g>
  );
}

function Statement({ box, lines }: NonNullable<BeamLayout["statement"]>) {
  return (
    <g>
      <rect {...box} fill="var(--sheet)" stroke="var(--rust)" strokeWidth="1.5" />
      {lines.map((line) => (
        <Line key={`${line.x} ${line.y}`} line={line} />
      ))}
    </g>
  );
}

function Line(props: { line: PlacedText; quiet?: boolean; number?: MarkedNumber | undefined }) {
  const { line, number } = props;
  return (
    <text
      x={line.x}
      y={line.y}
      fontWeight={line.bold ? 600 : undefined}
      style={{ fontSize: line.fontSize }}
      className={props.quiet ? "quiet" : undefined}
    >
      {number ? <WithNumber text={line.text} number={number} /> : line.text}
    </text>
  );
}

/** A line of a label with the standing's number in it marked by its place; the leader has none. */
function WithNumber({ text, number }: { text: string; number: MarkedNumber }) {
  const from = text.startsWith("leads") ? -1 : text.indexOf(number.text);
  if (from < 0) return text;
  return (
    <>
      {text.slice(0, from)}
      <tspan data-at={number.at} data-exact={number.exact ?? undefined}>
        {number.text}
      </tspan>
      {text.slice(from + number.text.length)}
    </>
  );
}

function silentIn(view: BeamView, mark: BeamMark): boolean {
  return view.input.hypotheses.some((each) => each.key === mark.key && each.note !== null);
}

function ends({ from, to }: { from: Point; to: Point }) {
  return { x1: from.x, y1: from.y, x2: to.x, y2: to.y };
}
