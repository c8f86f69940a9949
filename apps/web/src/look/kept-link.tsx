"use client";

import Link from "next/link";
import { useSearchParams } from "next/navigation";
import type { ReactNode } from "react";

/** A link within a campaign that keeps the ledger size of an `as of` view. */
export function KeptLink(props: { href: string; className?: string; children: ReactNode }) {
  const size = useSearchParams().get("size");
  return (
    <Link
      href={size ? `${props.href}?size=${encodeURIComponent(size)}` : props.href}
      className={props.className ?? "link"}
      // A grid has a hundred of them: each would ask the server for its page in advance.
      prefetch={false}
    >
      {props.children}
    </Link>
  );
}
