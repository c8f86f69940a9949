import { payloadSchemas } from "./entries";
import type { EntryKind, Payload } from "./entries";
import { readForm } from "./form";
import type { Result } from "./problem";

/** Reads a payload of an entry: its defaults written out, or everything that is wrong with it. */
export function readPayload<K extends EntryKind>(kind: K, value: unknown): Result<Payload<K>> {
  const read = readForm(payloadSchemas[kind], value, "");
  if (read.problems.length > 0) return { ok: false, problems: read.problems };
  return { ok: true, value: read.value as Payload<K> };
}
