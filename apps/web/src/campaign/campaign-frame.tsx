import { formatCount } from "@weighhouse/figures/numbers";
import Link from "next/link";
import type { ReactNode } from "react";
import { LiveState } from "@/live/live-state";
import { ButtonLink } from "@/look/button";
import { Notice } from "@/look/notice";
import { Tabs } from "@/look/tabs";
import { Time } from "@/look/time";
import { readCampaign, readStandings } from "@/server/campaign";
import type { CampaignView } from "@/server/campaign";

/**
 * What stands around every page of a campaign: where one is, the title, its state in a line, the
 * way to its other pages. `size` not null shows it all as of that many ledger entries.
 */
export async function CampaignFrame(props: {
  campaignKey: string;
  size?: number | null;
  children: ReactNode;
}) {
  const size = props.size ?? null;
  const view = await readCampaign(props.campaignKey, size);
  const { state } = await readStandings(props.campaignKey, size);
  const { campaign } = view.document;
  const base = `/campaigns/${campaign.key}`;
  return (
    <>
      {/* React puts it into the page's head. */}
      <link
        rel="alternate"
        type="application/atom+xml"
        title={`${campaign.title}: ledger`}
        href={`/api/v1/campaigns/${campaign.key}/feed.atom`}
      />
      <nav aria-label="Where you are" className="text-[14px] text-quiet">
        <Link href="/campaigns" className="no-underline hover:underline">
          Campaigns
        </Link>{" "}
        / {campaign.key}
      </nav>
      <div className="flex flex-wrap items-start justify-between gap-x-8 gap-y-2">
        <h1 className="my-1 min-w-0 max-w-[34em]">{campaign.title}</h1>
        <Actions view={view} base={base} />
      </div>
      <StateLine
        view={view}
        historic={size !== null && size < view.latestSize}
        scored={state === "current"}
      />
      <Tabs label="Campaign" tabs={tabsOf(view, base)} />
      {view.clock === "simulated" ? (
        <div className="mb-4">
          <Notice label="Simulated clock.">
            This ledger&rsquo;s times were set by hand, for a demonstration: they prove nothing
            about when anything was filed.
          </Notice>
        </div>
      ) : null}
      {props.children}
    </>
  );
}

function StateLine(props: { view: CampaignView; historic: boolean; scored: boolean }) {
  const { view, historic, scored } = props;
  const { campaign, measurements, facilities } = view.document;
  const counted = measurements.filter((measurement) => measurement.setAside === null).length;
  return (
    <ul className="mt-1 mb-3 flex list-none flex-wrap gap-x-5 gap-y-0.5 text-[14px] text-quiet">
      <li>
        {historic ? (
          <strong className="font-semibold text-brass">as it was at entry {view.size - 1}</strong>
        ) : (
          <LiveState
            campaignKey={campaign.key}
            // A time set by hand says nothing about how long ago it was.
            at={view.clock === "simulated" ? null : view.at}
            shown={{ size: view.size, scored }}
          />
        )}
      </li>
      <li>
        {plural(counted, "measurement")}, {plural(facilities.length, "facility", "facilities")}
      </li>
      <li>
        <RegistrationLine closes={campaign.registrationCloses} at={view.at} />
      </li>
      <li>ledger of {plural(view.size, "entry", "entries")}, head signed</li>
      {view.visibility === "members" ? <li>seen by members only</li> : null}
    </ul>
  );
}

function RegistrationLine({ closes, at }: { closes: string | null; at: string }) {
  if (closes === null) return "registration open";
  return (
    <>
      {Date.parse(closes) <= Date.parse(at) ? "registration closed" : "registration closes"}{" "}
      <Time at={closes} />
    </>
  );
}

function Actions({ view, base }: { view: CampaignView; base: string }) {
  const coordinates = view.role === "coordinator";
  if (!coordinates && view.role !== "member") return null;
  return (
    <div className="no-print flex flex-wrap gap-2 pt-1.5 pb-1 text-[14px]">
      <ButtonLink href={`${base}/post`}>Post measurements</ButtonLink>
      <ButtonLink href={`${base}/register`}>Register a hypothesis</ButtonLink>
      {coordinates ? <ButtonLink href={`${base}/declare`}>Declare</ButtonLink> : null}
    </div>
  );
}

function tabsOf(view: CampaignView, base: string) {
  const member = view.role === "coordinator" || view.role === "member";
  return [
    { href: base, label: "Standings", exact: true },
    { href: `${base}/quantities`, label: "Quantities" },
    { href: `${base}/hypotheses`, label: "Hypotheses" },
    { href: `${base}/ledger`, label: "Ledger" },
    { href: `${base}/audit`, label: "Audit trail" },
    ...(member
      ? [
          { href: `${base}/members`, label: "People" },
          { href: `${base}/keys`, label: "Keys" },
        ]
      : []),
  ];
}

function plural(count: number, one: string, many = `${one}s`): string {
  return `${formatCount(count)} ${count === 1 ? one : many}`;
}
