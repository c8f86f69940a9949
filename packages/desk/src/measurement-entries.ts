import type { MeasurementContent, Payload } from "@weighhouse/campaign/entries";
import { splitPosting } from "@weighhouse/store/split-posting";
import type { NewEntry } from "./document-after";

type Correlations = Payload<"measurements.posted">["correlations"];

/** The entries that any number of measurements becomes, as the store parts a posting. */
export function measurementEntries(
  measurements: MeasurementContent[],
  correlations: Correlations = [],
): NewEntry[] {
  if (measurements.length === 0) return [];
  return splitPosting(measurements, correlations).map(({ value }) => ({
    kind: "measurements.posted",
    payload: value,
  }));
}
