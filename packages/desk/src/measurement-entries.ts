import { MEASUREMENTS_PER_ENTRY } from "@weighhouse/campaign/entries";
import type { MeasurementContent, Payload } from "@weighhouse/campaign/entries";
import type { NewEntry } from "./document-after";

type Correlations = Payload<"measurements.posted">["correlations"];

/** Entries for any number of measurements; a correlation stands with the later of its two. */
export function measurementEntries(
  measurements: MeasurementContent[],
  correlations: Correlations = [],
): NewEntry[] {
  const block = new Map(
    measurements.map(({ id }, i) => [id, Math.floor(i / MEASUREMENTS_PER_ENTRY)]),
  );
  const laterBlock = ({ a, b }: Correlations[number]) =>
    Math.max(block.get(a) ?? 0, block.get(b) ?? 0);
  const entries: NewEntry[] = [];
  for (let from = 0; from < measurements.length; from += MEASUREMENTS_PER_ENTRY) {
    entries.push({
      kind: "measurements.posted",
      payload: {
        measurements: measurements.slice(from, from + MEASUREMENTS_PER_ENTRY),
        correlations: correlations.filter((one) => laterBlock(one) === entries.length),
      },
    });
  }
  return entries;
}
