"use client";

import Link from "next/link";
import { usePathname, useRouter } from "next/navigation";
import { useState, useTransition } from "react";
import { Button } from "@/look/button";
import { Time } from "@/look/time";

/**
 * The whole page as it was when the ledger held so many entries. A plain form: without a script its
 * button asks for `?size=`; with one, letting go of the slider does. The address can be shared.
 */
export function AsOf(props: {
  size: number;
  latestSize: number;
  at: string;
  /** Sizes at which the standings moved, for stepping from one to the next. */
  steps: readonly number[];
}) {
  const path = usePathname();
  const router = useRouter();
  const [chosen, setChosen] = useState<number | null>(null);
  const size = chosen ?? props.size;
  const [loading, start] = useTransition();
  const go = (next: number) =>
    start(() => {
      setChosen(null);
      router.push(next >= props.latestSize ? path : `${path}?size=${next}`, { scroll: false });
    });
  const earlier = props.steps.findLast((step) => step < props.size);
  const later = props.steps.find((step) => step > props.size);
  // A ledger of one entry has no other state to go to.
  if (props.latestSize < 2) return null;
  return (
    <form
      method="get"
      action={path}
      className="no-print mt-3 flex flex-wrap items-center gap-x-4 gap-y-2 text-[14px] text-quiet"
      onSubmit={(event) => {
        event.preventDefault();
        go(size);
      }}
    >
      <label htmlFor="as-of-size" className="whitespace-nowrap">
        As of ledger entry
      </label>
      <input
        id="as-of-size"
        name="size"
        type="range"
        min={1}
        max={props.latestSize}
        value={size}
        aria-valuetext={`entry ${size - 1} of ${props.latestSize - 1}`}
        className="min-w-40 flex-1 accent-brass sm:max-w-[420px]"
        onChange={(event) => setChosen(Number(event.target.value))}
        onPointerUp={() => chosen !== null && go(chosen)}
        onKeyUp={(event) => event.key.startsWith("Arrow") && chosen !== null && go(chosen)}
      />
      <span className="whitespace-nowrap">
        {size - 1}
        {loading ? ", on its way" : null}
        {!loading && (chosen === null || chosen === props.size) ? (
          <>
            , <Time at={props.at} />
            {props.size === props.latestSize ? " (now)" : ""}
          </>
        ) : null}
      </span>
      <span className="flex flex-wrap gap-3">
        {earlier ? (
          <Link className="link" scroll={false} href={`${path}?size=${earlier}`}>
            one move earlier
          </Link>
        ) : null}
        {later && later < props.latestSize ? (
          <Link className="link" scroll={false} href={`${path}?size=${later}`}>
            one move later
          </Link>
        ) : null}
        {props.size < props.latestSize ? (
          <Link className="link" scroll={false} href={path}>
            now
          </Link>
        ) : null}
      </span>
      <noscript>
        <Button type="submit">Show</Button>
      </noscript>
    </form>
  );
}
