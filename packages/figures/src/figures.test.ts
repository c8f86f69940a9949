import * as fc from "fast-check";
import { SaxesParser } from "saxes";
import type { Standings, VerdictRow } from "@weighhouse/campaign/standings";
import { describe, expect, test } from "vitest";
import { beamInput } from "./beam-input";
import { beamSvg } from "./beam-svg";
import { gridSvg, type GridInput } from "./grid-svg";
import { measurandSvg, type MeasurandInput } from "./measurand-svg";
import { timelineSvg, type TimelineInput } from "./timeline-svg";

type Read = {
  ids: string[];
  texts: string[];
  title: string;
  description: string;
  elements: number;
};

/** Parses a figure as XML; throws where it isn't well-formed. */
function readSvg(svg: string): Read {
  const read: Read = { ids: [], texts: [], title: "", description: "", elements: 0 };
  const open: { name: string; text: string }[] = [];
  const parser = new SaxesParser();
  parser.on("opentag", ({ name, attributes }) => {
    read.elements++;
    open.push({ name, text: "" });
    if (typeof attributes.id === "string") read.ids.push(attributes.id);
  });
  parser.on("text", (text) => {
    const last = open.at(-1);
    if (last !== undefined) last.text += text;
  });
  parser.on("closetag", () => {
    const closed = open.pop();
    if (closed?.name === "text") read.texts.push(closed.text);
    if (closed?.name === "title" && open.length === 1) read.title = closed.text;
    if (closed?.name === "desc") read.description = closed.text;
  });
  parser.on("error", (error) => {
    throw error;
  });
  parser.write(svg).close();
  return read;
}

const hypotheses = [
  { key: "seepage", title: "Slow seepage", place: 0 },
  { key: "ballast", title: "Ballast <shift> & settling", place: 1 },
];

const standings = {
  hypotheses: [
    {
      key: "seepage",
      lnEvidence: -4,
      lnEvidenceError: 0.03,
      log10BayesFactor: 0,
      silent: 0,
    },
    { key: "ballast", lnEvidence: -7, lnEvidenceError: 0.04, log10BayesFactor: -1.3, silent: 2 },
  ],
  noModel: { lnEvidence: -9.5 },
  warnings: [{ code: "every-hypothesis-fails", at: "", text: "" }],
} as unknown as Standings;

const verdict = (hypothesis: string, word: VerdictRow["verdict"], tension: number | null) =>
  ({
    hypothesis,
    measurand: "sag",
    verdict: word,
    tension,
    order: "before-observation",
  }) as VerdictRow;

const grid: GridInput = {
  hypotheses,
  measurands: [
    { key: "sag", title: "Sag in March", measured: "8.10 ± 0.60 mm" },
    { key: "strain", title: "Strain", measured: "–" },
  ],
  verdicts: [verdict("seepage", "pass", 0.42), verdict("ballast", "fail", -6.23)],
};

const timeline: TimelineInput = {
  hypotheses,
  points: [
    { at: "2031-03-01T00:00:00Z", lnEvidence: { seepage: -1, ballast: -1.2 } },
    { at: "2031-03-09T00:00:00Z", lnEvidence: { seepage: -2.5, ballast: null } },
    { at: "2031-04-02T00:00:00Z", lnEvidence: { seepage: -4, ballast: -7 } },
  ],
};

const measurand: MeasurandInput = {
  key: "sag",
  title: "Sag in March",
  observable: { scale: "linear", unit: "mm" },
  reference: { low: 0, high: 20 },
  predictions: [
    { ...hypotheses[0]!, low: 6, high: 10 },
    { ...hypotheses[1]!, low: null, high: 5 },
  ],
  measurements: [
    { id: "pier:1", value: 8.1, low: 7.5, high: 8.7, limit: null, counted: true },
    { id: "pier:2", value: 12, low: null, high: null, limit: "upper", counted: false },
  ],
  combined: { value: 8.1, sd: 0.6 },
};

const figures: Record<string, (widthPx: number) => string> = {
  beam: (widthPx) =>
    beamSvg(
      beamInput(standings, (key) => hypotheses.find((each) => each.key === key)?.title ?? key),
      { widthPx },
    ),
  grid: (widthPx) => gridSvg(grid, { widthPx }),
  timeline: (widthPx) => timelineSvg(timeline, { widthPx }),
  measurand: (widthPx) => measurandSvg(measurand, { widthPx }),
};

describe.each(Object.entries(figures))("the %s figure", (name, draw) => {
  test.each([320, 390, 800, 1160])(
    "is well-formed at %i pixels, its ids fixed and its own",
    (width) => {
      const { ids } = readSvg(draw(width));
      expect(new Set(ids).size).toBe(ids.length);
      expect(ids.every((id) => id.startsWith(name))).toBe(true);
      expect(readSvg(draw(width + 1)).ids).toEqual(ids);
    },
  );

  test("has the same bytes each time", () => {
    expect(draw(800)).toBe(draw(800));
  });

  test("has a title and says in words what it shows", () => {
    const { title, description } = readSvg(draw(800));
    expect(title).not.toBe("");
    expect(description).toContain("Slow seepage");
    expect(description).toContain("Ballast <shift> & settling");
  });

  test("names every hypothesis in text, so that colour isn't needed", () => {
    const text = readSvg(draw(1160)).texts.join(" ");
    expect(text).toContain("Slow seepage");
    expect(text).toContain("Ballast");
  });

  test("gives each colour plainly before the page's variable, for print tools that know none", () => {
    const declarations = draw(800).match(/[a-z-]+:var\(--[^)]*\)/g) ?? [];
    expect(declarations.length).toBeGreaterThan(5);
    for (const declaration of declarations) {
      const [, property, fallback] = /^([a-z-]+):var\(--[a-z0-9]+,(.*)\)$/.exec(declaration) ?? [];
      expect(draw(800)).toContain(`{${property}:${fallback};${declaration}}`);
    }
  });
});

test("hostile titles are shown as they are", () => {
  const title = fc.string({ unit: "binary", minLength: 1, maxLength: 40 });
  fc.assert(
    fc.property(title, (text) => {
      readSvg(
        beamSvg(
          {
            hypotheses: [{ key: "a", title: text, log10BayesFactor: 0, error: 0, note: null }],
            noModel: null,
            noneDescribes: false,
          },
          { widthPx: 400 },
        ),
      );
      readSvg(measurandSvg({ ...measurand, title: text }, { widthPx: 400 }));
    }),
    { numRuns: 100 },
  );
});

test("the beam tells of the leader, the others and the no-model evidence", () => {
  const { description, texts } = readSvg(figures.beam!(1160));
  expect(description).toBe(
    "Slow seepage leads; Ballast <shift> & settling −1.30; no model −2.39. No hypothesis describes the data.",
  );
  expect(texts).toContain("−1.30, silent on 2");
  expect(texts).toContain("ln evidence −9.50");
});

test("the grid puts the number first, then the word; a hypothesis without a prediction is silent", () => {
  const { texts } = readSvg(figures.grid!(1160));
  expect(texts.join("|")).toContain("+0.4|pass");
  expect(texts.join("|")).toContain("−6.2|fail");
  expect(texts.filter((text) => text === "silent")).toHaveLength(2);
});

test("a line of ln evidence ends in a cross where the likelihood is zero, and goes on after", () => {
  const path = /id="timeline-ballast" d="([^"]*)"/.exec(figures.timeline!(800))?.[1] ?? "";
  expect(path).toMatch(/^M[\d.]+ [\d.]+H[\d.]+m-4 -4l8 8m0 -8l-8 8M[\d.]+ [\d.]+H[\d.]+$/);
});

test("two thousand measurements make a figure no taller than a page", () => {
  const measurements = Array.from({ length: 2000 }, (_, index) => ({
    ...measurand.measurements[0]!,
    id: `pier:${index}`,
  }));
  const svg = measurandSvg({ ...measurand, measurements }, { widthPx: 800 });
  const height = Number(/ height="(\d+)/.exec(svg)?.[1]);
  expect(height).toBeLessThan(900);
});
