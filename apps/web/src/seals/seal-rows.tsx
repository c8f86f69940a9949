import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Seal } from "@weighhouse/desk/read-seals";
import Link from "next/link";
import { KeptLink } from "@/look/kept-link";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

const stateWords = { sealed: "sealed", revealed: "opened", never: "never opened" } as const;

/** Seals as everyone sees them: what they are of, since when and until when; never what they say. */
export function SealRows({
  seals,
  document,
}: {
  seals: readonly Seal[];
  document: CampaignDocument;
}) {
  const base = `/campaigns/${document.campaign.key}`;
  const titles = new Map(document.measurands.map(({ key, title }) => [key, title]));
  const hypotheses = new Map(document.hypotheses.map(({ key, title }) => [key, title]));
  const teams = new Map(document.teams.map(({ key, title }) => [key, title]));
  return (
    <Table
      caption="Seals"
      stackBelow="broad"
      head={
        <tr>
          <th scope="col">Quantity</th>
          <th scope="col">What</th>
          <th scope="col">By</th>
          <th scope="col">Sealed</th>
          <th scope="col">Until</th>
          <th scope="col">State</th>
          <th scope="col">
            Digest <span className="gloss">SHA-256, first 8 digits</span>
          </th>
        </tr>
      }
    >
      {seals.map((seal) => (
        <tr key={seal.digest}>
          <th scope="row">
            <KeptLink className="link" href={`${base}/quantities/${seal.measurand}`}>
              {titles.get(seal.measurand) ?? seal.measurand}
            </KeptLink>
          </th>
          <td data-label="What">
            {seal.hypothesis === null
              ? seal.of
              : `${seal.of} of “${hypotheses.get(seal.hypothesis) ?? seal.hypothesis}”`}
          </td>
          <td data-label="By">
            <span>
              {seal.team === null ? "an observer" : (teams.get(seal.team) ?? seal.team)}
              <span className="text-quiet">
                {seal.keeping === "held" ? ", held here" : ", kept by them"}
              </span>
            </span>
          </td>
          <td data-label="Sealed">
            <span>
              <Time at={seal.at} />,{" "}
              <Link className="link" href={`${base}/ledger/${seal.seq}`}>
                entry {seal.seq}
              </Link>
            </span>
          </td>
          <td data-label="Until">
            <Time at={seal.until} />
          </td>
          <td data-label="State">
            <State seal={seal} base={base} />
          </td>
          <td data-label="Digest">
            <code title={seal.digest}>{seal.digest.slice(0, 8)}</code>
          </td>
        </tr>
      ))}
    </Table>
  );
}

function State({ seal, base }: { seal: Seal; base: string }) {
  return (
    <div>
      <span className={seal.state === "never" ? "font-medium text-rust" : "font-medium"}>
        {stateWords[seal.state]}
      </span>
      {seal.revealed === null ? null : (
        <>
          {" "}
          <Time at={seal.revealed.at} />,{" "}
          <Link className="link" href={`${base}/ledger/${seal.revealed.seq}`}>
            entry {seal.revealed.seq}
          </Link>
        </>
      )}
      {seal.held === null ? null : (
        <details className="mt-1">
          <summary className="cursor-pointer text-[13.5px] text-quiet">
            what it says, seen by you alone
          </summary>
          <pre className="whitespace-pre-wrap text-[13px]">
            <code>{JSON.stringify(said(seal.held.content), null, 2)}</code>
          </pre>
        </details>
      )}
    </div>
  );
}

/** Without what is absent, which a reader would have to look past. */
function said(content: Record<string, unknown>): Record<string, unknown> {
  return Object.fromEntries(Object.entries(content).filter(([, value]) => value !== null));
}
