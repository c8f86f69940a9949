import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { SealCounts } from "@weighhouse/desk/read-seals";
import { KeptLink } from "@/look/kept-link";
import { Table } from "@/look/table";

/** How many predictions each hypothesis has sealed, opened, and let lapse. */
export function SealCountRows(props: {
  counts: readonly SealCounts[];
  document: CampaignDocument;
}) {
  const { counts, document } = props;
  const titles = new Map(document.hypotheses.map(({ key, title }) => [key, title]));
  return (
    <Table
      caption="Seals by hypothesis"
      head={
        <tr>
          <th scope="col">Hypothesis</th>
          <th scope="col" className="number">
            Sealed
          </th>
          <th scope="col" className="number">
            Opened
          </th>
          <th scope="col" className="number">
            Never opened
          </th>
        </tr>
      }
    >
      {counts.map(({ hypothesis, sealed, revealed, never }) => (
        <tr key={hypothesis}>
          <th scope="row">
            <KeptLink
              className="link"
              href={`/campaigns/${document.campaign.key}/hypotheses/${hypothesis}`}
            >
              {titles.get(hypothesis) ?? hypothesis}
            </KeptLink>
          </th>
          <td data-label="Sealed" className="number">
            {sealed}
          </td>
          <td data-label="Opened" className="number">
            {revealed}
          </td>
          <td data-label="Never opened" className="number">
            {never}
          </td>
        </tr>
      ))}
    </Table>
  );
}
