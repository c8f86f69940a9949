import { isTime } from "@weighhouse/campaign/instants";
import type { TimeReading } from "../table-match";
import { dayTimeOf } from "./decimal-days";
import { dayOf, leapSteps, MJD_OF_1970, secondsOfUtcDay } from "./leap-seconds";
import { toUtc } from "./scales";
import type { DayTime } from "./scales";

const SECOND = 1_000_000_000;
const DAY_MS = 86_400_000;
const ISO =
  /^(\d{4}-\d{2}-\d{2})[Tt\s]\s*(\d{2}:\d{2})(:\d{2})?(\.\d{1,9})?\s*(Z|z|UTC|utc|[+-]\d{2}:?\d{2})?$/;

export type ReadTime = { ok: true; time: string } | { ok: false; allowed: string };

/**
 * A cell as an RFC 3339 time in UTC. A UTC time in ISO 8601 keeps its digits; whatever is converted
 * is rounded to the digits that it has, at least to the millisecond and at most to the nanosecond; a
 * TDB to the microsecond.
 *
 * @param reading null: only what says itself that it is UTC, or how far from it
 */
export function readTime(text: string, reading: TimeReading | null): ReadTime {
  if (reading === null || reading.format === "iso") return readIso(text, reading);
  const { format, scale } = reading;
  const at = dayTimeOf(text, { ...reading, format, scale });
  const name = format.toUpperCase();
  if (at === null) return { ok: false, allowed: `a number: a ${name}` };
  return inUtc(at, reading, scale === "utc" ? at.digits : Math.max(3, at.digits));
}

function readIso(text: string, reading: TimeReading | null): ReadTime {
  const match = ISO.exec(text);
  const [, date = "", clock = "", seconds = ":00", fraction = "", zone = null] = match ?? [];
  const plain = `${date}T${clock}${seconds}${fraction}Z`;
  const scale = reading?.scale ?? null;
  if (match === null || !isTime(plain)) return { ok: false, allowed: ISO_WORDS };
  if (scale !== "utc" && scale !== null && (zone !== null || seconds === ":60")) {
    return { ok: false, allowed: `a time in ${scale.toUpperCase()}, without a zone` };
  }
  if (zone !== null && /^[+-]/.test(zone)) return fromOffset(plain, zone, fraction);
  if (zone !== null || scale === "utc") return { ok: true, time: plain };
  if (scale === null) {
    return { ok: false, allowed: `${ISO_WORDS}; or choose that the column is in UTC` };
  }
  const [hour = 0, minute = 0] = clock.split(":").map(Number);
  const ns =
    (hour * 3600 + minute * 60 + Number(seconds.slice(1))) * SECOND +
    Number(fraction.slice(1).padEnd(9, "0"));
  return inUtc({ day: dayOf(date), ns }, reading!, Math.max(3, fraction.length - 1));
}

const ISO_WORDS = "an RFC 3339 time in UTC, such as 2031-03-01T00:00:00Z";

function fromOffset(plain: string, zone: string, fraction: string): ReadTime {
  const at = new Date(`${plain.slice(0, 19)}${zone.replace(/(\d{2}):?(\d{2})$/, "$1:$2")}`);
  if (Number.isNaN(at.getTime())) return { ok: false, allowed: ISO_WORDS };
  const time = `${at.toISOString().slice(0, 19)}${fraction}Z`;
  return isTime(time) ? { ok: true, time } : { ok: false, allowed: ISO_WORDS };
}

function inUtc(at: DayTime, { scale }: TimeReading, digits: number): ReadTime {
  const utc = toUtc(scale, at);
  if (utc === null) {
    const first = new Date((leapSteps[0]!.day - MJD_OF_1970) * DAY_MS).toISOString().slice(0, 10);
    const name = scale.toUpperCase();
    return { ok: false, allowed: `a time from ${first} on in ${name}; earlier ones in UTC` };
  }
  const time = textOf(utc, scale === "tdb" ? 6 : digits);
  return isTime(time)
    ? { ok: true, time }
    : { ok: false, allowed: "a time in the years 0 to 9999" };
}

function textOf(given: DayTime, digits: number): string {
  const step = 10 ** (9 - digits);
  let { day, ns } = { day: given.day, ns: Math.round(given.ns / step) * step };
  const length = secondsOfUtcDay(day) * SECOND;
  if (ns >= length) [day, ns] = [day + 1, ns - length];
  const date = new Date((day - MJD_OF_1970) * DAY_MS);
  if (Number.isNaN(date.getTime())) return "";
  const whole = Math.floor(ns / SECOND);
  const minutes = Math.min(Math.floor(whole / 60), 1439);
  const two = (value: number) => String(value).padStart(2, "0");
  const fraction = String(ns % SECOND)
    .padStart(9, "0")
    .slice(0, digits);
  const clock = `${two(Math.floor(minutes / 60))}:${two(minutes % 60)}:${two(whole - minutes * 60)}`;
  return `${date.toISOString().slice(0, 10)}T${clock}${digits === 0 ? "" : `.${fraction}`}Z`;
}
