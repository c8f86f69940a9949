import type { ListedCampaign } from "@weighhouse/desk/list-campaigns";
import { formatCount } from "@weighhouse/figures/numbers";
import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import Link from "next/link";
import { Num } from "@/look/number";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

/** The campaigns as a table: title, teams, when registration closes, last measurement, leader. */
export function CampaignRows({ campaigns }: { campaigns: readonly ListedCampaign[] }) {
  return (
    <Table
      caption="Campaigns"
      head={
        <tr>
          <th scope="col">Campaign</th>
          <th scope="col" className="number">
            Teams
          </th>
          <th scope="col" className="number">
            Hypotheses
          </th>
          <th scope="col">Registration closes</th>
          <th scope="col">Last measurement</th>
          <th scope="col">
            Leads <span className="gloss">by log₁₀ B over the next</span>
          </th>
        </tr>
      }
    >
      {campaigns.map((campaign) => (
        <CampaignRow key={campaign.key} campaign={campaign} />
      ))}
    </Table>
  );
}

function CampaignRow({ campaign }: { campaign: ListedCampaign }) {
  return (
    <tr>
      <th scope="row" className="sm:max-w-[30em]">
        <Link href={`/campaigns/${campaign.key}`} className="link font-semibold">
          {campaign.title}
        </Link>
        {campaign.visibility === "members" ? <span className="gloss"> members only</span> : null}
        {campaign.role === "coordinator" || campaign.role === "member" ? (
          <span className="gloss"> you: {campaign.role}</span>
        ) : null}
      </th>
      <td data-label="Teams" className="number">
        {formatCount(campaign.teams)}
      </td>
      <td data-label="Hypotheses" className="number">
        {formatCount(campaign.hypotheses)}
      </td>
      <td data-label="Registration closes">
        {campaign.registrationCloses ? (
          <Time at={campaign.registrationCloses} />
        ) : (
          <span className="text-quiet">open</span>
        )}
      </td>
      <td data-label="Last measurement">
        {campaign.lastMeasurementAt ? (
          <span>
            <Time at={campaign.lastMeasurementAt} dateOnly />
            <span className="text-quiet">, {formatCount(campaign.measurements)} in all</span>
          </span>
        ) : (
          <span className="text-quiet">none yet</span>
        )}
      </td>
      <td data-label="Leads">
        <Leader leader={campaign.leader} />
      </td>
    </tr>
  );
}

function Leader({ leader }: { leader: ListedCampaign["leader"] }) {
  if (leader === null) return <span className="text-quiet">nothing weighed yet</span>;
  return (
    <span>
      {leader.title}
      {leader.log10Lead === null ? null : (
        <span className="whitespace-nowrap text-quiet">
          {" "}
          by <Num text={formatLog10B(leader.log10Lead)} exact={leader.log10Lead} />
        </span>
      )}
    </span>
  );
}
