"use client";

import Link from "next/link";
import { usePathname, useSearchParams } from "next/navigation";

export interface Tab {
  href: string;
  label: string;
  /** The tab is current on this exact address only, not below it. */
  exact?: boolean;
}

/** Navigation within a campaign; the ledger size of an `as of` view goes with the reader. */
export function Tabs({ label, tabs }: { label: string; tabs: readonly Tab[] }) {
  const path = usePathname();
  const size = useSearchParams().get("size");
  return (
    <nav
      aria-label={label}
      className="no-print mb-5 flex flex-wrap gap-x-1.5 border-b border-rule text-[12.5px] sm:gap-x-5 sm:text-[14.5px]"
    >
      {tabs.map((tab) => {
        const current = tab.exact ? path === tab.href : path.startsWith(tab.href);
        return (
          <Link
            key={tab.href}
            href={size ? `${tab.href}?size=${encodeURIComponent(size)}` : tab.href}
            aria-current={current ? "page" : undefined}
            className="-mb-px border-b-3 border-transparent pt-2 pb-1.5 text-quiet no-underline hover:text-ink aria-[current]:border-brass aria-[current]:text-ink"
          >
            {tab.label}
          </Link>
        );
      })}
    </nav>
  );
}
