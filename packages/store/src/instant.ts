import { customType } from "drizzle-orm/pg-core";

/**
 * Instants are texts with microseconds, `2031-03-01T00:00:00.000000Z`: Date holds milliseconds only,
 * and two entries of one transaction lie a microsecond apart.
 */
export const instant = customType<{ data: string; driverData: string }>({
  dataType: () => "timestamp(6) with time zone",
  fromDriver: instantFromPostgres,
  toDriver: (value) => value,
});

/** Reads PostgreSQL's ISO output in UTC: `2031-03-01 00:00:00.25+00`. */
export function instantFromPostgres(text: string): string {
  const match = /^(\d{4}-\d\d-\d\d)[ T](\d\d:\d\d:\d\d)(?:\.(\d{1,6}))?(?:\+00|Z)$/.exec(text);
  if (match === null) throw new RangeError(`found ${text}; allowed is a time in UTC`);
  return `${match[1]}T${match[2]}.${(match[3] ?? "").padEnd(6, "0")}Z`;
}

/** Microseconds since 1970. */
export function microsOfInstant(text: string): bigint {
  const match = /^(\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d)(?:\.(\d{1,6}))?Z$/.exec(text);
  const seconds = match === null ? NaN : Date.parse(`${match[1]}Z`) / 1000;
  if (match === null || Number.isNaN(seconds)) {
    throw new RangeError(`found ${text}; allowed is a time such as 2031-03-01T00:00:00.000000Z`);
  }
  return BigInt(seconds) * 1_000_000n + BigInt((match[2] ?? "").padEnd(6, "0"));
}

export function instantOfMicros(micros: bigint): string {
  const millis = Number(micros / 1000n);
  const rest = String(micros % 1000n).padStart(3, "0");
  return new Date(millis).toISOString().replace("Z", `${rest}Z`);
}
