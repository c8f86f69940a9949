/**
 * Times as the documents hold them: RFC 3339 in UTC. They are compared as texts, digit by digit,
 * because a double can't hold microseconds since a far epoch.
 */
const TO_SECONDS = 19;

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
