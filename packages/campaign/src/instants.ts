/**
 * Times as the documents hold them: RFC 3339 in UTC. They are compared as texts, digit by digit,
 * because a double can't hold microseconds since a far epoch.
 */
const TO_SECONDS = 19;

/**
 * Whether a text, or a part of it, is a time of the documents: `TIME_PATTERN`, without the cost of a
 * pattern.
 */
export function isTime(text: string, start = 0, end = text.length): boolean {
  const last = end - 1;
  if (last - start < TO_SECONDS || text.charCodeAt(last) !== 90) return false;
  const year = digits(text, start, 4);
  const month = digits(text, start + 5, 2);
  const day = digits(text, start + 8, 2);
  const hour = digits(text, start + 11, 2);
  const minute = digits(text, start + 14, 2);
  const second = digits(text, start + 17, 2);
  if (
    text.charCodeAt(start + 4) !== 45 ||
    text.charCodeAt(start + 7) !== 45 ||
    text.charCodeAt(start + 10) !== 84 ||
    text.charCodeAt(start + 13) !== 58 ||
    text.charCodeAt(start + 16) !== 58 ||
    !(year >= 0 && month >= 1 && month <= 12 && day >= 1 && day <= daysIn(year, month)) ||
    !(hour >= 0 && hour <= 23 && minute >= 0 && minute <= 59 && second >= 0) ||
    second > (hour === 23 && minute === 59 ? 60 : 59)
  ) {
    return false;
  }
  const point = start + TO_SECONDS;
  if (last === point) return true;
  const decimals = last - point - 1;
  return (
    text.charCodeAt(point) === 46 &&
    decimals >= 1 &&
    decimals <= 9 &&
    digits(text, point + 1, decimals) >= 0
  );
}

/** The number that a text's digits write; -1 where one of them is none. */
function digits(text: string, from: number, count: number): number {
  let value = 0;
  for (let at = from; at < from + count; at++) {
    const digit = text.charCodeAt(at) - 48;
    if (!(digit >= 0 && digit <= 9)) return -1;
    value = value * 10 + digit;
  }
  return value;
}

function daysIn(year: number, month: number): number {
  if (month !== 2) return month === 4 || month === 6 || month === 9 || month === 11 ? 30 : 31;
  return year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0) ? 29 : 28;
}

/** Negative when a is earlier than b, 0 for the same instant, positive when later. */
export function compareInstants(a: string, b: string): number {
  if (a === b) return 0;
  // Up to the second the texts are of one form; behind it .5 and .500 are the same.
  let digit = TO_SECONDS - 1;
  while (digit >= 0 && a.charCodeAt(digit) === b.charCodeAt(digit)) digit -= 1;
  if (digit >= 0) return a < b ? -1 : 1;
  const fractionOfA = fraction(a);
  const fractionOfB = fraction(b);
  if (fractionOfA === fractionOfB) return 0;
  return fractionOfA < fractionOfB ? -1 : 1;
}

/** The earlier of two times, either of which may be missing. */
export function earlier(a: string | null, b: string | null): string | null {
  if (a === null) return b;
  if (b === null) return a;
  return compareInstants(b, a) < 0 ? b : a;
}

/**
 * Seconds from one instant to another. POSIX seconds: a leap second counts as the next one.
 *
 * @returns seconds; the fractions are subtracted apart, so microseconds survive over centuries
 */
export function secondsBetween(from: string, to: string): number {
  const whole = (wholeMs(to) - wholeMs(from)) / 1000;
  return whole + (Number(`0.${fraction(to) || "0"}`) - Number(`0.${fraction(from) || "0"}`));
}

function wholeMs(time: string): number {
  const date = new Date(0);
  date.setUTCFullYear(
    Number(time.slice(0, 4)),
    Number(time.slice(5, 7)) - 1,
    Number(time.slice(8, 10)),
  );
  date.setUTCHours(
    Number(time.slice(11, 13)),
    Number(time.slice(14, 16)),
    Number(time.slice(17, 19)),
  );
  return date.getTime();
}

/** The digits after the point without trailing zeros, so that .5 and .500 are one text. */
function fraction(time: string): string {
  if (time.charCodeAt(TO_SECONDS) !== 46) return "";
  return time.slice(TO_SECONDS + 1, -1).replace(/0+$/, "");
}
