import type { PlacedText } from "./boxes";

export type Attributes = Record<string, string | number | null>;

/** An SVG element as text. Numbers are cut to hundredths, so that the same figure has the same bytes. */
export function element(name: string, attributes: Attributes, ...children: string[]): string {
  const written = Object.entries(attributes)
    .filter(([, value]) => value !== null)
    .map(
      ([key, value]) =>
        ` ${key}="${typeof value === "number" ? short(value) : escapeXml(value ?? "")}"`,
    )
    .join("");
  return children.length === 0
    ? `<${name}${written}/>`
    : `<${name}${written}>${children.join("")}</${name}>`;
}

/** A placed line of text. */
export function textElement(line: PlacedText, style = ""): string {
  const classes = [line.bold ? "strong" : "", style].filter(Boolean).join(" ");
  return element(
    "text",
    { x: line.x, y: line.y, "font-size": line.fontSize, class: classes || null },
    escapeXml(line.text),
  );
}

/** A number with at most two decimals. */
export function short(value: number): string {
  return String(Number(value.toFixed(2)) || 0);
}

/** What XML 1.0 can't hold is replaced; markup is escaped. */
export function escapeXml(text: string): string {
  return text
    .replaceAll(/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, "\ufffd")
    .replaceAll("&", "&amp;")
    .replaceAll("<", "&lt;")
    .replaceAll(">", "&gt;")
    .replaceAll('"', "&quot;");
}

export type FigureFrame = {
  /** Begins every id in the figure: fixed, and distinct from other figures' on a page. */
  id: string;
  title: string;
  description: string;
  width: number;
  height: number;
};

/**
 * A whole figure: titled and described for those who hear it, in the page's colours where it stands
 * in a page (currentColor and the page's variables), else in ink on nothing.
 */
export function figure(frame: FigureFrame, body: string[]): string {
  const { id, width, height } = frame;
  const [titleId, descriptionId] = [`${id}-title`, `${id}-description`];
  return `${element(
    "svg",
    {
      xmlns: "http://www.w3.org/2000/svg",
      id,
      width,
      height,
      viewBox: `0 0 ${short(width)} ${short(height)}`,
      role: "img",
      "aria-labelledby": `${titleId} ${descriptionId}`,
    },
    element("title", { id: titleId }, escapeXml(frame.title)),
    element("desc", { id: descriptionId }, escapeXml(frame.description)),
    element("style", {}, styles(id)),
    ...body,
  )}\n`;
}

/** The inks of hypotheses, for those who see colours; shape and dash tell them apart without. */
export const HUES = [
  "#264e86",
  "#8a5c14",
  "#6b3f7d",
  "#2c6c6a",
  "#9c3a5b",
  "#4e6416",
  "#7a4a34",
  "#4a5568",
] as const;

/** Each colour twice: what doesn't know variables (print tools) keeps the first. */
function styles(id: string): string {
  const rule = (name: string, property: string, plain: string, variable: string) =>
    `#${id} .${name}{${property}:${plain};${property}:var(--${variable},${plain})}`;
  return [
    `#${id}{color:#1c2530;color:var(--ink,#1c2530)}`,
    `#${id} text{fill:currentColor;font-family:"IBM Plex Sans",system-ui,sans-serif;font-size:13px}`,
    `#${id} .strong{font-weight:600}`,
    `#${id} .middle{text-anchor:middle}`,
    `#${id} .end{text-anchor:end}`,
    `#${id} .line{fill:none;stroke:currentColor}`,
    rule("quiet", "fill", "#586170", "quiet"),
    rule("rule", "stroke", "#d8d2c4", "rule"),
    rule("edge", "stroke", "#857e6d", "edge"),
    rule("well", "fill", "#d8d2c4", "rule"),
    rule("sheet", "fill", "#fffefb", "sheet"),
    rule("brass", "stroke", "#85590f", "brass"),
    rule("rust", "stroke", "#9c3521", "rust"),
    ...HUES.flatMap((hue, index) => [
      rule(`ink${index + 1}`, "stroke", hue, `h${index + 1}`),
      rule(`fill${index + 1}`, "fill", hue, `h${index + 1}`),
    ]),
  ].join("");
}
