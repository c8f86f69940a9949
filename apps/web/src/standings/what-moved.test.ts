import { expect, test } from "vitest";
import { whatMoved } from "./what-moved";
import type { StandingsDigest } from "./what-moved";

const before: StandingsDigest = {
  size: 7,
  at: "2031-03-01T00:00:00.000000Z",
  counted: 1,
  setAside: 0,
  hypotheses: [
    { key: "tide", title: "Tide", log10BayesFactor: 0 },
    { key: "wind", title: "Wind", log10BayesFactor: -0.4 },
  ],
  verdicts: [
    { hypothesis: "tide", measurand: "height", verdict: "undecided" },
    { hypothesis: "wind", measurand: "height", verdict: "undecided" },
  ],
  measurands: [{ key: "height", title: "Height", measurements: 1 }],
};

test("a posted measurement is told by its count, the verdicts it turned and how far each hypothesis went", () => {
  const after: StandingsDigest = {
    ...before,
    size: 8,
    counted: 2,
    hypotheses: [
      { key: "wind", title: "Wind", log10BayesFactor: 0 },
      { key: "tide", title: "Tide", log10BayesFactor: -2.25 },
    ],
    verdicts: [
      { hypothesis: "tide", measurand: "height", verdict: "fail" },
      { hypothesis: "wind", measurand: "height", verdict: "undecided" },
    ],
    measurands: [{ key: "height", title: "Height", measurements: 2 }],
  };
  expect(whatMoved(before, after)).toEqual([
    "Wind now leads, before it was Tide.",
    "1 measurement more of Height.",
    "Height turned from undecided to fail for Tide.",
    "Wind went from −0.40 to 0 in log₁₀ B.",
    "Tide went from 0 to −2.25 in log₁₀ B.",
  ]);
});

test("a hypothesis that came is told as registered, one that set nothing moving is not told of again", () => {
  const after: StandingsDigest = {
    ...before,
    size: 8,
    hypotheses: [...before.hypotheses, { key: "ice", title: "Ice", log10BayesFactor: null }],
  };
  expect(whatMoved(before, after)).toEqual(["Ice was registered."]);
});

test("the same state twice moves nothing", () => {
  expect(whatMoved(before, { ...before, size: 9 })).toEqual([]);
});
