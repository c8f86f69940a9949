"use client";

import { useSyncExternalStore, type ReactNode } from "react";

const never = () => () => {};

/**
 * A form's fields, closed until the page's program runs and while the form is being sent: what is
 * typed then would be lost when the program takes the fields over, or empties them.
 */
export function FormBody({ busy = false, children }: { busy?: boolean; children: ReactNode }) {
  const ready = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  return (
    <fieldset disabled={!ready || busy} className="min-w-0">
      {children}
    </fieldset>
  );
}
