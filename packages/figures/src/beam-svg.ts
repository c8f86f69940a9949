import type { BeamInput, BeamLayout, BeamMark, BeamOptions } from "./beam";
import { layoutBeam } from "./beam-layout";
import { BEAM_PX } from "./beam-parts";
import type { Point } from "./boxes";
import { hypothesisMark, markElement } from "./hypothesis-marks";
import { formatLog10B } from "./standing-numbers";
import { element, escapeXml, figure, short, textElement } from "./svg";

export type BeamSvgOptions = BeamOptions & {
  /** A hypothesis's place in the document, for its ink and shape; its rank unless given. */
  placeOf?: (key: string) => number;
};

/** The beam as SVG: standings drawn by their log10 Bayes factors against the leader. */
export function beamSvg(input: BeamInput, options: BeamSvgOptions): string {
  const layout = layoutBeam(input, options);
  const place = (mark: BeamMark) => options.placeOf?.(mark.key) ?? mark.index;
  return figure(
    {
      id: "beam",
      title: "The beam: log10 Bayes factors against the leading hypothesis",
      description: beamInWords(input),
      width: layout.width,
      height: layout.height,
    },
    [
      ...layout.bands.flatMap(({ box, label }, index) => [
        element("rect", { ...box, class: "well", opacity: 0.14 + 0.14 * index }),
        ...(label === null ? [] : [textElement(label, "quiet")]),
      ]),
      ...layout.marks.map((mark) => stem(mark.stem)),
      ...beam(layout),
      ...layout.ticks.flatMap(({ value, from, to, label }) => [
        line(from, to, { class: "line", "stroke-width": value === 0 ? 3 : 1 }),
        ...(label === null ? [] : [textElement(label, "quiet")]),
      ]),
      ...layout.marks.map((mark) => hung(mark, place(mark))),
      ...statement(layout),
      ...layout.legend.map((text) => textElement(text, "quiet")),
    ],
  );
}

/** The standings in a sentence, for those who hear the figure. */
export function beamInWords({ hypotheses, noModel, noneDescribes }: BeamInput): string {
  const [first, ...others] = hypotheses;
  if (first === undefined) return "No hypothesis hangs on the beam.";
  const rest = others.map((item) => `${item.title} ${formatLog10B(item.log10BayesFactor)}`);
  const without = noModel === null ? [] : [`no model ${formatLog10B(noModel.log10BayesFactor)}`];
  const leads = first.log10BayesFactor === null ? "has a likelihood of zero" : "leads";
  const sentence = [`${first.title} ${leads}`, ...rest, ...without].join("; ");
  return `${sentence}.${noneDescribes ? " No hypothesis describes the data." : ""}`;
}

function beam({ beam, beyond }: BeamLayout): string[] {
  return [
    line(beam.from, beam.to, { class: "line", "stroke-width": BEAM_PX }),
    line(beam.from, beam.to, { class: "brass", "stroke-width": 1.6 }),
    ...(beyond === null
      ? []
      : [
          line(beyond.from, beyond.to, {
            class: "line",
            "stroke-width": 2,
            "stroke-dasharray": "5 4",
          }),
        ]),
  ];
}

function stem(points: Point[]): string {
  const path = points.map(({ x, y }) => `${short(x)},${short(y)}`).join(" ");
  return element("polyline", { points: path, fill: "none", class: "edge" });
}

function hung(mark: BeamMark, index: number): string {
  const id = `beam-${mark.key}`;
  const [x, y] = [mark.spot.x + mark.spot.width / 2, mark.spot.y + mark.spot.height / 2];
  const lines = mark.lines.map((text) => textElement(text, text.bold ? "" : "quiet"));
  if (mark.role === "no-model") {
    const path = `M${short(x)} ${short(y - 7)}l7 7-7 7-7-7z`;
    return element(
      "g",
      { id },
      element("path", { d: path, class: "sheet", stroke: "currentColor" }),
      element("rect", { ...mark.label, class: "sheet rule" }),
      ...lines,
    );
  }
  const style = hypothesisMark(index);
  return element(
    "g",
    { id },
    element("title", {}, escapeXml(mark.title)),
    element("rect", { ...mark.spot, class: `fill${style.hue}` }),
    element("rect", { ...mark.label, rx: 2, class: `sheet ink${style.hue}`, "stroke-width": 1.8 }),
    markElement(
      style,
      mark.label.x + mark.label.width - 9,
      mark.label.y + mark.label.height - 9,
      9,
    ),
    ...lines,
  );
}

function statement({ statement }: BeamLayout): string[] {
  if (statement === null) return [];
  return [
    element("rect", { ...statement.box, class: "sheet rust", "stroke-width": 1.5 }),
    ...statement.lines.map((text) => textElement(text)),
  ];
}

function line(from: Point, to: Point, style: Record<string, string | number>): string {
  return element("line", { x1: from.x, y1: from.y, x2: to.x, y2: to.y, ...style });
}
