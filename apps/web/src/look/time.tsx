"use client";

import { formatDate, formatTime } from "@weighhouse/figures/times";
import { useSyncExternalStore } from "react";

const never = () => () => {};

/** A time in UTC; the reader's local time stands in the title once the browser is there. */
export function Time({ at, dateOnly = false }: { at: string; dateOnly?: boolean }) {
  const local = useSyncExternalStore(
    never,
    () => `${new Date(at).toLocaleString()} your time`,
    () => undefined,
  );
  return (
    <time dateTime={at} title={local} className="whitespace-nowrap">
      {dateOnly ? formatDate(at) : formatTime(at)}
    </time>
  );
}
