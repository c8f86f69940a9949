import type { Measurement } from "../document";
import { measurementSchema } from "../measurement";

/** A measurement with the fields given and every other at its default. */
export function quantity(fields: Partial<Measurement>): Measurement {
  return measurementSchema.parse({ id: "m-1", measurand: "level", ...fields });
}
