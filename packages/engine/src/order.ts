import { compareInstants, earlier } from "@weighhouse/campaign/instants";
import type { Measurement } from "@weighhouse/campaign/document";
import type { Order } from "@weighhouse/campaign/standings";
import type { MeasurandFrame } from "./frame";

/** The earliest dates of a measurand's measurements, set-aside ones too. */
export interface FirstDates {
  measured: boolean;
  observed: string | null;
  posted: string | null;
  known: string | null;
}

export function firstDates({ firstObservedAt, firstPostedAt }: MeasurandFrame): FirstDates {
  const measured = firstObservedAt !== null || firstPostedAt !== null;
  return { measured, observed: firstObservedAt, posted: firstPostedAt, known: null };
}

/** The earliest dates of several measurands together. */
export function earliestOf(measurands: readonly MeasurandFrame[]): FirstDates {
  const dates: FirstDates = { measured: false, observed: null, posted: null, known: null };
  for (const one of measurands) {
    const { measured, observed, posted } = firstDates(one);
    dates.measured ||= measured;
    dates.observed = earlier(dates.observed, observed);
    dates.posted = earlier(dates.posted, posted);
  }
  return dates;
}

export function noteDates(dates: FirstDates, measurement: Measurement): void {
  const { observedAt, postedAt, knownSince } = measurement;
  dates.measured = true;
  if (observedAt !== dates.observed) dates.observed = earlier(dates.observed, observedAt);
  const posted = postedAt ?? observedAt;
  if (posted !== dates.posted) dates.posted = earlier(dates.posted, posted);
  if (knownSince !== dates.known) dates.known = earlier(dates.known, knownSince);
}

/**
 * When a prediction was filed, against its measurand's earliest dates (section 8). Without its own
 * date, or where the measurements have none, there is nothing to compare: `undated`.
 */
export function orderOf(
  registeredAt: string | null,
  dates: FirstDates,
  registrationCloses: string | null,
): Order {
  if (registeredAt === null) return "undated";
  const notBefore = (date: string | null) =>
    date !== null && compareInstants(registeredAt, date) >= 0;
  if (notBefore(dates.known) || notBefore(dates.posted)) return "after";
  if (registrationCloses !== null && compareInstants(registeredAt, registrationCloses) > 0) {
    return "after";
  }
  const dated = dates.known ?? dates.posted ?? dates.observed;
  if (dates.measured && dated === null) return "undated";
  return notBefore(dates.observed) ? "before-posting" : "before-observation";
}
