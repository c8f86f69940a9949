import type { TimelineStep } from "@weighhouse/store/standings";
import { expect, test } from "vitest";
import { movedByText, timelineRows } from "./timeline-rows";

const step = (size: number, lnEvidence: number): TimelineStep => ({
  size,
  at: `2031-03-0${size}T00:00:00.000000Z`,
  movedBy: { seq: size - 1, kind: "measurements.posted", facilities: ["pier"], measurements: 2 },
  points: [{ hypothesis: "tide", lnEvidence }],
});

test("as of a size the timeline ends there, and its last state lasts until then", () => {
  const now = { size: 4, at: "2031-03-04T00:00:00.000000Z" };
  const rows = timelineRows([step(2, -1), step(3, -2), step(5, -9)], now);
  expect(rows.map((row) => [row.size, row.values["tide"]])).toEqual([
    [2, -1],
    [3, -2],
    [4, -2],
  ]);
  expect(rows[2]?.time).toBe(Date.parse(now.at));
});

test("a timeline that has moved at its very end gets no row more", () => {
  expect(timelineRows([step(2, -1)], { size: 2, at: step(2, 0).at })).toHaveLength(1);
  expect(timelineRows([], { size: 2, at: step(2, 0).at })).toEqual([]);
});

test("a step says what moved it", () => {
  const { movedBy } = step(2, -1);
  expect(movedByText(movedBy)).toBe("2 measurements from pier");
  expect(movedByText({ ...movedBy, measurements: 1, facilities: [] })).toBe("1 measurement");
  expect(movedByText({ ...movedBy, kind: "measurements.withdrawn" })).toBe(
    "2 measurements withdrawn",
  );
  expect(movedByText({ ...movedBy, kind: "hypothesis.registered" })).toBe(
    "a hypothesis registered",
  );
});
