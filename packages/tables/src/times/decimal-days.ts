import { secondsOfUtcDay } from "./leap-seconds";
import type { DayTime, TimeScale } from "./scales";

const SECOND = 1_000_000_000n;
const MJD_ZERO = "2400000.5";
const DECIMAL = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d{1,3}))?$/;

/**
 * A Julian or Modified Julian Date from its digits, without the loss that a double has: seven or
 * eight figures stand before the point. A UTC day that a leap second ends is 86,401 s long, as
 * the IAU's SOFA library takes it (its "quasi-JD").
 *
 * @param offset days that are added, exactly as their shortest decimal digits say
 * @returns the day and nanoseconds into it, and the digits of a second that the text resolves; null
 *   for a text that is no number
 */
export function dayTimeOf(
  text: string,
  { format, scale, offset }: { format: "jd" | "mjd"; scale: TimeScale; offset: number },
): (DayTime & { digits: number }) | null {
  const given = decimal(text);
  const added = decimal(String(offset));
  if (given === null || added === null) return null;
  const zero = format === "jd" ? decimal(MJD_ZERO)! : { digits: 0n, places: 0 };
  const places = Math.max(given.places, added.places, zero.places);
  const scaled = (one: Decimal) => one.digits * 10n ** BigInt(places - one.places);
  const unit = 10n ** BigInt(places);
  const days = scaled(given) + scaled(added) - scaled(zero);
  const whole = days / unit - (days % unit < 0n ? 1n : 0n);
  const day = Number(whole);
  const seconds = scale === "utc" ? secondsOfUtcDay(day) : 86_400;
  const length = BigInt(seconds) * SECOND;
  const ns = ((days - whole * unit) * length * 2n + unit) / (2n * unit);
  // A digit behind the fourth of a day is one of a second: 1e-5 d is 0.864 s. Of a long day each is.
  const digits = Math.min(9, seconds === 86_400 ? Math.max(0, given.places - 4) : places);
  return { ...(ns === length ? { day: day + 1, ns: 0 } : { day, ns: Number(ns) }), digits };
}

type Decimal = { digits: bigint; places: number };

/** Digits and how many of them stand behind the point. */
function decimal(text: string): Decimal | null {
  const match = DECIMAL.exec(text);
  if (match === null) return null;
  const [, sign, before = "", behind = "", power = "0"] = match;
  if (before + behind === "" || before.length + behind.length > 40) return null;
  const digits = BigInt(`${before}${behind}`) * (sign === "-" ? -1n : 1n);
  const places = behind.length - Number(power);
  if (Math.abs(places) > 60) return null;
  return places >= 0 ? { digits, places } : { digits: digits * 10n ** BigInt(-places), places: 0 };
}
