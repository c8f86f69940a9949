import { expect, test } from "vitest";
import { formatDate, formatDuration, formatTime, formatWindow } from "./times";

test("times are in UTC whatever the offset they came with", () => {
  expect(formatTime("2031-06-09T14:05:59Z")).toBe("9 Jun 2031, 14:05 UTC");
  expect(formatTime("2031-06-09T23:05:07+09:00", { seconds: true })).toBe(
    "9 Jun 2031, 14:05:07 UTC",
  );
  expect(formatDate("2031-03-01T00:00:00.000000Z")).toBe("1 Mar 2031");
});

test("what is no time is shown as it stands", () => {
  expect(formatTime("soon")).toBe("soon");
  expect(formatDate("soon")).toBe("soon");
});

test("a duration keeps its largest unit", () => {
  expect(formatDuration(3_000)).toBe("3\u00a0s");
  expect(formatDuration(125_000)).toBe("2\u00a0min");
  expect(formatDuration(5 * 3600_000)).toBe("5\u00a0h");
  expect(formatDuration(21.9 * 86_400_000)).toBe("21\u00a0d");
});

test("a window says its year once", () => {
  expect(formatWindow("2031-03-01T00:00:00Z", "2031-04-01T00:00:00Z")).toBe("1 Mar to 1 Apr 2031");
  expect(formatWindow("2030-12-01T00:00:00Z", "2031-01-05T00:00:00Z")).toBe(
    "1 Dec 2030 to 5 Jan 2031",
  );
  expect(formatWindow("2031-03-01T00:00:00Z", null)).toBe("from 1 Mar 2031");
  expect(formatWindow(null, "2031-03-01T00:00:00Z")).toBe("until 1 Mar 2031");
  expect(formatWindow("2031-03-01T01:00:00Z", "2031-03-01T05:00:00Z")).toBe("1 Mar 2031");
  expect(formatWindow(null, null)).toBe("any time");
});
