import { expect, test } from "vitest";
import { linearTicks, logTicks, timeTicks } from "./axis-ticks";

test("a linear axis has round numbers within its ends", () => {
  expect(linearTicks(-0.17, 2.33)).toEqual([0, 0.5, 1, 1.5, 2]);
  expect(linearTicks(0, 0.5, 5)).toEqual([0, 0.1, 0.2, 0.3, 0.4, 0.5]);
  expect(linearTicks(3, 3)).toEqual([3]);
});

test("a logarithmic axis has powers of ten, and 2 and 5 where those are few", () => {
  expect(logTicks(0.5, 30)).toEqual([0.5, 1, 2, 5, 10, 20]);
  expect(logTicks(0.001, 100)).toEqual([0.001, 0.01, 0.1, 1, 10, 100]);
});

test("a time axis within a day says hours, over months it says dates", () => {
  const at = (text: string) => Date.parse(text);
  const day = timeTicks(at("1919-05-29T11:00:00Z"), at("1919-05-29T15:00:00Z"));
  expect(day.ticks.map(day.text)).toEqual([
    "29 May, 11:00",
    "29 May, 12:00",
    "29 May, 13:00",
    "29 May, 14:00",
    "29 May, 15:00",
  ]);
  const months = timeTicks(at("2031-01-01T00:00:00Z"), at("2031-12-31T00:00:00Z"));
  expect(months.ticks.map(months.text)).toEqual([
    "1 Jan 2031",
    "1 Apr 2031",
    "1 Jul 2031",
    "1 Oct 2031",
  ]);
});
