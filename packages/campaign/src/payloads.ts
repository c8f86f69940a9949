import { payloadSchemas } from "./entries";
import type { EntryKind, Payload } from "./entries";
import { MEASUREMENTS_PER_ENTRY } from "./entries";
import { readForm } from "./form";
import { quickContent } from "./quick-measurement";
import type { Result } from "./problem";

/** Reads a payload of an entry: its defaults written out, or everything that is wrong with it. */
export function readPayload<K extends EntryKind>(kind: K, value: unknown): Result<Payload<K>> {
  if (kind === "measurements.posted") {
    const quick = quickPosting(value);
    if (quick !== null) return { ok: true, value: quick as Payload<K> };
  }
  const read = readForm(payloadSchemas[kind], value, "");
  if (read.problems.length > 0) return { ok: false, problems: read.problems };
  return { ok: true, value: read.value as Payload<K> };
}

/** A plain posting read without words; null where the schema has to look. */
function quickPosting(value: unknown): Payload<"measurements.posted"> | null {
  if (typeof value !== "object" || value === null || Array.isArray(value)) return null;
  const { measurements, correlations = null, ...others } = value as Record<string, unknown>;
  if (!Array.isArray(measurements) || Object.keys(others).length > 0) return null;
  if (Array.isArray(correlations) ? correlations.length > 0 : correlations !== null) return null;
  if (measurements.length === 0 || measurements.length > MEASUREMENTS_PER_ENTRY) return null;
  const contents = [];
  for (const one of measurements) {
    const content = quickContent(one);
    if (content === null) return null;
    contents.push(content);
  }
  return { measurements: contents, correlations: [] };
}
