import { describe } from "vitest";
import type { Open } from "../testing/documents";
import { check } from "../testing/refusals";

describe("reports of an event", () => {
  const report = (id: string, occurred: boolean, fields: Open = {}) => ({
    id,
    measurand: "slide-april",
    occurred,
    ...fields,
  });
  const reports = (list: Open[]) => (document: Open) =>
    void document.measurements.splice(12, 1, ...list);
  const words =
    "allowed efficiencies below 1 or false alarms above 0 that leave one truth possible";
  check([
    [
      "two certain ones that contradict each other",
      reports([report("yes:1", true), report("no:1", false)]),
      [
        `/measurements/13: found no:1 and yes:1, which no truth of slide-april can give together; ${words}`,
      ],
    ],
    [
      "one that nothing can give",
      reports([report("yes:1", true, { efficiency: 0 })]),
      [`/measurements/12: found yes:1, which neither truth of slide-april can give; ${words}`],
    ],
    [
      "a doubtful one beside a certain one",
      reports([report("yes:1", true), report("no:1", false, { efficiency: 0.9 })]),
      [],
    ],
    [
      "the contradicting one set aside",
      reports([report("yes:1", true), report("no:1", false, { setAside: { reason: "fog" } })]),
      [],
    ],
  ]);
});
