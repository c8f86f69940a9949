import type { TimelineStep } from "@weighhouse/store/standings";

/** One moment of the chart: time, ledger size, and each hypothesis's ln evidence from then on. */
export interface TimelineRow {
  time: number;
  at: string;
  size: number;
  movedBy: string;
  values: Record<string, number | null>;
}

/** The timeline up to a size, as rows for the chart and for its table; the last lasts until then. */
export function timelineRows(
  steps: readonly TimelineStep[],
  now: { size: number; at: string },
): TimelineRow[] {
  const rows = steps
    .filter((step) => step.size <= now.size)
    .map((step) => ({
      time: Date.parse(step.at),
      at: step.at,
      size: step.size,
      movedBy: movedByText(step.movedBy),
      values: Object.fromEntries(step.points.map((point) => [point.hypothesis, point.lnEvidence])),
    }));
  const last = rows.at(-1);
  if (last === undefined || last.size >= now.size) return rows;
  const time = Date.parse(now.at);
  return [...rows, { ...last, ...now, time, movedBy: "still so: later entries moved nothing" }];
}

/** What a step was moved by: `2 measurements from sobral`, `a hypothesis registered`. */
export function movedByText(movedBy: TimelineStep["movedBy"]): string {
  const { kind, measurements, facilities } = movedBy;
  if (kind === "measurements.posted") {
    const count = `${measurements} measurement${measurements === 1 ? "" : "s"}`;
    return facilities.length > 0 ? `${count} from ${facilities.join(", ")}` : count;
  }
  const many = measurements === 1 ? "a measurement" : `${measurements} measurements`;
  const words: Record<string, string> = {
    "hypothesis.registered": "a hypothesis registered",
    "hypothesis.amended": "a hypothesis amended",
    "prediction.sealed": "a prediction sealed",
    "prediction.revealed": "a sealed prediction opened",
    "measurement.set-aside": "a measurement set aside",
    "measurement.corrected": "a measurement corrected",
    "measurements.withdrawn": `${many} withdrawn`,
    "measurement.revealed": "a sealed measurement opened",
    "measurand.closed": "a quantity closed",
    "registration.closed": "registration closed",
  };
  return words[kind] ?? kind;
}
