import { kindInWords } from "@weighhouse/campaign/kind-words";
import type { ListedEntry } from "@weighhouse/desk/read-entries";
import { formatCount } from "@weighhouse/figures/numbers";
import Link from "next/link";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

/** Entries of the ledger as a table. */
export function EntryRows({ entries, path }: { entries: readonly ListedEntry[]; path: string }) {
  return (
    <Table
      caption="Ledger entries, the newest first"
      head={
        <tr>
          <th scope="col" className="number">
            Entry
          </th>
          <th scope="col">Time</th>
          <th scope="col">What</th>
          <th scope="col">About</th>
          <th scope="col">By</th>
          <th scope="col">
            Leaf <span className="gloss">SHA-256, first 8 digits</span>
          </th>
        </tr>
      }
    >
      {entries.map((listed) => (
        <tr key={listed.entry.seq}>
          <th scope="row" className="number">
            <Link className="link" href={`${path}/${listed.entry.seq}`}>
              <span className="sm:hidden">Entry </span>
              {formatCount(listed.entry.seq)}
            </Link>
          </th>
          <td data-label="Time">
            <Time at={listed.entry.at} />
          </td>
          <td data-label="What">
            <span title={listed.entry.kind}>{kindInWords(listed.entry.kind)}</span>
          </td>
          <td data-label="About">
            <About about={listed.about} />
          </td>
          <td data-label="By">
            <By listed={listed} />
          </td>
          <td data-label="Leaf" className="max-sm:hidden!">
            <code title={listed.leafHash}>{listed.leafHash.slice(0, 8)}</code>
          </td>
        </tr>
      ))}
    </Table>
  );
}

function About({ about }: { about: ListedEntry["about"] }) {
  if (about.count === 0) return <span className="text-quiet">the campaign</span>;
  const shown = about.keys.slice(0, 3).join(", ");
  const more = about.count - Math.min(3, about.keys.length);
  return (
    <span className="[overflow-wrap:anywhere]">
      {shown}
      {more > 0 ? <span className="text-quiet"> and {formatCount(more)} more</span> : null}
    </span>
  );
}

function By({ listed }: { listed: ListedEntry }) {
  if ("system" in listed.entry.by) return <span className="text-quiet">the clock</span>;
  const { team } = listed.entry.by;
  return (
    <span>
      {listed.name ?? <span className="text-quiet">a person no longer named</span>}
      {team ? <span className="text-quiet">, {team}</span> : null}
    </span>
  );
}
