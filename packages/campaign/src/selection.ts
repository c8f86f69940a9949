import type { Selection } from "./entries";
import { compareInstants } from "./instants";
import type { Part, PartContent, PartsBefore } from "./parts";

/**
 * The measurements that a withdrawal selects, of those that are not withdrawn yet. A range's ends
 * are in it; an undated measurement is in no range that has an end.
 */
export function selectedMeasurements(selection: Selection, before: PartsBefore): Part[] {
  if (selection.by === "ids") {
    return selection.ids.flatMap((key): Part[] => {
      const content = before.get("measurement", key);
      return isCurrent(content) ? [{ part: "measurement", key, content }] : [];
    });
  }
  return [...before.measurementsOf(selection.facility)].filter(({ content }) =>
    isWithin(content, selection),
  );
}

/** Whether a measurement is there and was not withdrawn. */
export function isCurrent(content: PartContent | null): content is PartContent {
  return content !== null && (content["withdrawn"] ?? null) === null;
}

type Range = { from: string | null; to: string | null };

/** Whether a measurement that isn't withdrawn was observed within a range. */
export function isWithin(content: PartContent, { from, to }: Range): boolean {
  if (!isCurrent(content)) return false;
  const { observedAt } = content;
  if (typeof observedAt !== "string") return from === null && to === null;
  return (
    (from === null || compareInstants(observedAt, from) >= 0) &&
    (to === null || compareInstants(observedAt, to) <= 0)
  );
}
