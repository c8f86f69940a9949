"use client";

import { useSyncExternalStore, type ReactNode } from "react";

const never = () => () => {};

/**
 * A form's fields, closed until the page's program runs: what is typed before that would be lost
 * when it takes the fields over.
 */
export function FormBody({ children }: { children: ReactNode }) {
  const ready = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  return (
    <fieldset disabled={!ready} className="min-w-0">
      {children}
    </fieldset>
  );
}
