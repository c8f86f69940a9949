import type { Metadata } from "next";
import Link from "next/link";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { EntryRows } from "@/ledger/entry-rows";
import { TimeStampFacts } from "@/ledger/time-stamp-facts";
import { Section } from "@/look/section";
import { readCampaign, sizeFrom } from "@/server/campaign";
import { readFor } from "@/server/reader";

const PER_PAGE = 100;

export const metadata: Metadata = { title: "Ledger" };

/** The entries, newest first; `?to=` is where an older page ends, `?size=` where all of it does. */
export default async function LedgerPage(props: {
  params: Promise<{ key: string }>;
  searchParams: Promise<{ size?: string | string[]; to?: string | string[] }>;
}) {
  const { key } = await props.params;
  const search = await props.searchParams;
  const size = sizeFrom(search);
  const { size: end, role } = await readCampaign(key, size);
  const to = Math.min(end, sizeFrom({ size: search.to ?? [] }) ?? end);
  const from = Math.max(0, to - PER_PAGE);
  const [{ entries }, stamps] = await readFor(`/campaigns/${key}/ledger`, (caller) =>
    Promise.all([caller.ledger.entries({ key, from, to }), caller.ledger.timeStamps({ key })]),
  );
  const path = `/campaigns/${key}/ledger`;
  const address = (next: number) =>
    `${path}?${new URLSearchParams({ to: String(next), ...(size ? { size: String(size) } : {}) })}`;
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <Section
        title="Ledger"
        gloss="every entry, in the order of a signed Merkle tree (RFC 6962)"
        actions={
          <span className="flex gap-4 text-[14px]">
            <a className="link" href={`/api/v1/campaigns/${key}/feed.atom`}>
              feed
            </a>
            {role === "coordinator" ? (
              <Link className="link" href={`/campaigns/${key}/webhooks`}>
                webhooks
              </Link>
            ) : null}
            <a className="link" href={`/api/v1/campaigns/${key}/ledger/head`}>
              signed tree head
            </a>
          </span>
        }
      >
        <p className="mb-3 text-quiet">
          Nothing here is ever changed or taken away; a correction is a new entry. Open an entry to
          check in your browser that it stands in the signed ledger.
        </p>
        <EntryRows entries={entries.toReversed()} path={path} />
        <nav aria-label="Pages of the ledger" className="mt-3 flex gap-5">
          {to < end ? (
            <Link className="link" href={address(Math.min(end, to + PER_PAGE))}>
              newer entries
            </Link>
          ) : null}
          {from > 0 ? (
            <Link className="link" href={address(from)}>
              older entries
            </Link>
          ) : null}
        </nav>
      </Section>
      <Section
        title="Time-stamps"
        gloss="an outside authority’s word on when a head was there (RFC 3161)"
        actions={
          <a className="link text-[14px]" href={`/api/v1/campaigns/${key}/ledger/time-stamps`}>
            tokens
          </a>
        }
      >
        <TimeStampFacts path={path} stamps={stamps} />
      </Section>
    </CampaignFrame>
  );
}
