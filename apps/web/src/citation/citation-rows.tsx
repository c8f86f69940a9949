import type { ListedCitation } from "@weighhouse/desk/read-citations";
import Link from "next/link";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

/** The standings that were cited, each under its code. */
export function CitationRows({ citations }: { citations: readonly ListedCitation[] }) {
  return (
    <Table
      caption="Cited standings"
      head={
        <tr>
          <th scope="col">Code</th>
          <th scope="col">Time</th>
          <th scope="col" className="number">
            Entry
          </th>
          <th scope="col">Cited in</th>
        </tr>
      }
    >
      {citations.map(({ code, at, seq, note, by }) => (
        <tr key={code}>
          <th scope="row">
            <Link className="link font-mono" href={`/cite/${code}`}>
              {code}
            </Link>
          </th>
          <td data-label="Time">
            <Time at={at} />
          </td>
          <td data-label="Entry" className="number">
            {seq}
          </td>
          <td data-label="Cited in" className="[overflow-wrap:anywhere]">
            {by === "clock" ? (
              <span className="text-quiet">at data’s close, by the clock</span>
            ) : (
              note
            )}
          </td>
        </tr>
      ))}
    </Table>
  );
}
