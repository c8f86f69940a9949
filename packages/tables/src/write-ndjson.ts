import type { Measurement } from "@weighhouse/campaign/document";

/**
 * Measurements as NDJSON: an object a line, its fields as in a document, without those that nothing
 * is in and without `postedAt`, which is the ledger's. Read back they are the same.
 */
export function writeNdjson(measurements: readonly Measurement[]): string {
  return measurements.map((one) => `${JSON.stringify(fieldsOf(one))}\n`).join("");
}

function fieldsOf(measurement: Measurement): Record<string, unknown> {
  const given = Object.entries(measurement).filter(
    ([field, value]) => field !== "postedAt" && !isNothing(value),
  );
  return Object.fromEntries(given);
}

function isNothing(value: unknown): boolean {
  if (value === null) return true;
  return typeof value === "object" && Object.keys(value as object).length === 0;
}
