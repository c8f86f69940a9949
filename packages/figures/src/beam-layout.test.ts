import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import { layoutBeam, textBoxes, type BeamInput, type BeamLayout } from "./beam-layout";
import { beamScale } from "./beam-scale";
import { overlap, type Box } from "./boxes";

const titles = fc.oneof(
  fc.string({ minLength: 1, maxLength: 80, unit: "grapheme" }),
  fc.lorem({ maxCount: 9 }),
  fc.constant("Donaudampfschifffahrtselektrizitätenhauptbetriebswerkbauunterbeamtengesellschaft"),
);

/** Hypotheses in order of rank, from anywhere between close together and far apart. */
function beams(size: { min: number; max: number }): fc.Arbitrary<BeamInput> {
  const reach = fc.constantFrom(0, 0.001, 0.3, 3, 30, 4000, 1e300);
  return fc
    .record({
      reach,
      items: fc.array(
        fc.record({
          title: titles,
          part: fc.double({ min: 0, max: 1, noNaN: true }),
          impossible: fc.boolean(),
          error: fc.constantFrom(0, 0, 0.02, 0.7, 12),
          note: fc.option(fc.constantFrom("silent on 4", "2 filed after data, silent on 12 of 14")),
        }),
        { minLength: size.min, maxLength: size.max },
      ),
      noModel: fc.option(
        fc
          .constantFrom(-400, -4.2, -0.1, 0, 0.2, 7)
          .map((log10BayesFactor) => ({ log10BayesFactor, lnEvidence: -12.5 })),
      ),
      noneDescribes: fc.boolean(),
    })
    .map(({ reach, items, noModel, noneDescribes }) => ({
      hypotheses: items
        .map(({ part, impossible, ...item }, index) => ({
          ...item,
          key: `h${index}`,
          log10BayesFactor: index === 0 ? 0 : impossible && part > 0.7 ? null : -part * reach,
        }))
        .sort((a, b) => (b.log10BayesFactor ?? -Infinity) - (a.log10BayesFactor ?? -Infinity)),
      noModel,
      noneDescribes,
    }));
}

const widths = fc.integer({ min: 240, max: 2000 });
const directions = fc.constantFrom("horizontal" as const, "upright" as const, undefined);

function overlapping(boxes: Box[]): [Box, Box][] {
  return boxes.flatMap((a, index) =>
    boxes
      .slice(index + 1)
      .filter((b) => overlap(a, b))
      .map((b): [Box, Box] => [a, b]),
  );
}

function outside(layout: BeamLayout): Box[] {
  const slack = 1e-6;
  const marks = layout.marks.map((mark) => mark.spot);
  return [...textBoxes(layout), ...marks, ...layout.bands.map((band) => band.box)].filter(
    (box) =>
      box.x < -slack ||
      box.y < -slack ||
      box.x + box.width > layout.width + slack ||
      box.y + box.height > layout.height + slack,
  );
}

function stemsThroughLabels(layout: BeamLayout): string[] {
  return layout.marks.flatMap((mark) =>
    layout.marks
      .filter((other) => other !== mark)
      .filter(({ label }) =>
        mark.stem.slice(1).some((to, index) => {
          const from = mark.stem[index] ?? to;
          // Sampled finely enough that no label is slipped through.
          return Array.from({ length: 101 }, (_, step) => ({
            x: from.x + ((to.x - from.x) * step) / 100,
            y: from.y + ((to.y - from.y) * step) / 100,
          })).some(
            ({ x, y }) =>
              x > label.x + 0.01 &&
              x < label.x + label.width - 0.01 &&
              y > label.y + 0.01 &&
              y < label.y + label.height - 0.01,
          );
        }),
      )
      .map((other) => `${mark.key} through ${other.key}`),
  );
}

describe("labels on the beam", () => {
  test("never overlap, never leave the frame, and no stem runs through one", () => {
    fc.assert(
      fc.property(beams({ min: 0, max: 14 }), widths, directions, (input, widthPx, direction) => {
        const layout = layoutBeam(input, { widthPx, direction });
        expect(layout.width).toBe(widthPx);
        expect(overlapping(textBoxes(layout))).toEqual([]);
        expect(outside(layout)).toEqual([]);
        expect(stemsThroughLabels(layout)).toEqual([]);
      }),
      { numRuns: 400 },
    );
  });

  test("stay apart for twelve hypotheses within 0.3 of one another, at a phone's width and a desk's", () => {
    const hypotheses = Array.from({ length: 12 }, (_, index) => ({
      key: `h${index}`,
      title: `A hypothesis with quite a long title, the ${index + 1}th of them`,
      log10BayesFactor: (-0.3 * index) / 11,
      error: 0,
      note: null,
    }));
    for (const widthPx of [320, 390, 640, 768, 1160, 1600]) {
      const layout = layoutBeam(
        { hypotheses, noModel: { log10BayesFactor: -0.1, lnEvidence: -9 }, noneDescribes: true },
        { widthPx },
      );
      expect(layout.marks).toHaveLength(13);
      expect(overlapping(textBoxes(layout))).toEqual([]);
      expect(outside(layout)).toEqual([]);
      expect(stemsThroughLabels(layout)).toEqual([]);
    }
  });

  test("lie within their boxes, line by line", () => {
    fc.assert(
      fc.property(beams({ min: 1, max: 6 }), widths, (input, widthPx) => {
        for (const { label, lines } of layoutBeam(input, { widthPx }).marks) {
          for (const { box } of lines) {
            expect(box.x).toBeGreaterThanOrEqual(label.x);
            expect(box.x + box.width).toBeLessThanOrEqual(label.x + label.width + 1e-6);
            expect(box.y + box.height).toBeLessThanOrEqual(label.y + label.height + 1e-6);
          }
        }
      }),
    );
  });
});

describe("the beam", () => {
  const input: BeamInput = {
    hypotheses: [
      { key: "a", title: "Ash", log10BayesFactor: 0, error: 0, note: null },
      { key: "b", title: "Basalt", log10BayesFactor: -0.8, error: 0.05, note: null },
      { key: "c", title: "Clay", log10BayesFactor: -9.4, error: 0, note: "silent on 4" },
      { key: "d", title: "Dust", log10BayesFactor: null, error: 0, note: null },
    ],
    noModel: { log10BayesFactor: -4.2, lnEvidence: -9 },
    noneDescribes: false,
  };

  test("has its leader at the right end, and lower ones further left in the order of rank", () => {
    const layout = layoutBeam(input, { widthPx: 1160 });
    expect(layout.direction).toBe("horizontal");
    const spots = layout.marks.map(({ key, stem }) => [key, stem[0]?.x ?? 0] as const);
    expect(spots.map(([key]) => key)).toEqual(["a", "b", "no-model", "c", "d"]);
    expect(spots[0]?.[1]).toBe(layout.beam.from.x);
    expect(spots.at(-1)?.[1]).toBe(layout.beam.to.x);
    expect(spots.map(([, x]) => x)).toEqual(spots.map(([, x]) => x).toSorted((p, q) => q - p));
  });

  test("stands upright on a phone, the leader at its top", () => {
    const layout = layoutBeam(input, { widthPx: 390 });
    expect(layout.direction).toBe("upright");
    expect(layout.marks[0]?.stem[0]?.y).toBe(layout.beam.from.y);
    expect(layout.beam.from.x).toBe(layout.beam.to.x);
  });

  test("shows an uncertainty as the width of its mark", () => {
    const { marks } = layoutBeam(input, { widthPx: 1160 });
    const [exact, uncertain] = [marks[2], marks[1]];
    expect(uncertain?.spot.width).toBeGreaterThan(2 * (exact?.spot.width ?? Infinity));
  });

  test("goes on, dashed, to a no-model evidence above the leader's", () => {
    const layout = layoutBeam(
      { ...input, noModel: { log10BayesFactor: 1.3, lnEvidence: -9 } },
      { widthPx: 1160 },
    );
    expect(layout.marks[0]?.key).toBe("no-model");
    expect(layout.beyond?.to.x).toBeGreaterThan(layout.beam.from.x);
    expect(layoutBeam(input, { widthPx: 1160 }).beyond).toBeNull();
  });

  test("says on itself that no hypothesis describes the data", () => {
    expect(layoutBeam(input, { widthPx: 1160 }).statement).toBeNull();
    const { statement } = layoutBeam({ ...input, noneDescribes: true }, { widthPx: 1160 });
    expect(statement?.lines.map((line) => line.text).join(" ")).toBe(
      "No hypothesis describes the data: each has p < 0.001",
    );
  });

  // Kass & Raftery (1995), section 3.2, log10 table: bounds 0, 1/2, 1, 2.
  test("is graduated at the published bounds, in view even where all lie close", () => {
    const close = { ...input, hypotheses: input.hypotheses.slice(0, 1), noModel: null };
    for (const widthPx of [390, 1160]) {
      const { ticks, bands } = layoutBeam(close, { widthPx });
      const labels = ticks.map((tick) => tick.label?.text);
      expect(labels).toEqual(expect.arrayContaining(["0", "−0.5", "−1", "−2"]));
      expect(bands.map((band) => band.from)).toEqual([0, 0.5, 1, 2]);
    }
  });
});

test("the scale is monotone and compresses toward the far end", () => {
  const scale = beamScale([0, -100], 1000);
  const steps = [0, 1, 2, 3, 4].map((value) => scale.at(-value - 1) - scale.at(-value));
  expect(steps.every((step) => step > 0)).toBe(true);
  expect(steps).toEqual(steps.toSorted((a, b) => b - a));
  expect(scale.at(0)).toBe(0);
  expect(scale.at(-104)).toBeCloseTo(1000, 9);
});
