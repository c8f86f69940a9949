import type { Measurement, Observable } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import Link from "next/link";
import { resultInWords } from "@/campaign/plain-words";
import { Notice } from "@/look/notice";
import { Table } from "@/look/table";
import { Time } from "@/look/time";
import { differences, type Difference } from "./same-data";

/** Results from the same data side by side: what each says, what differs, and which of them counts. */
export function SameDataRows(props: {
  measurement: MeasurementContent;
  all: readonly Measurement[];
  observables: ReadonlyMap<string, Observable>;
  /** Address below which measurements stand, by id. */
  path: string;
}) {
  const { measurement, all, observables, path } = props;
  const counted = all.filter(({ setAside }) => setAside === null);
  return (
    <>
      {counted.length > 1 ? (
        <Notice tone="bad" label={`${counted.length} of them count.`}>
          The same data must not vote twice: set all but one aside.
        </Notice>
      ) : null}
      <Table
        caption="Results from the same data"
        stackBelow="middle"
        head={
          <tr>
            <th scope="col">Id</th>
            <th scope="col">Result</th>
            <th scope="col">Posted</th>
            <th scope="col">Counts</th>
            <th scope="col">
              What differs <span className="gloss">there, and here</span>
            </th>
          </tr>
        }
      >
        {all.map((one) => {
          const observable = observables.get(one.measurand);
          const itself = one.id === measurement.id;
          return (
            <tr key={one.id}>
              <th scope="row" className="[overflow-wrap:anywhere]">
                {itself ? (
                  <>
                    {one.id} <span className="text-quiet">this one</span>
                  </>
                ) : (
                  <Link className="link" href={`${path}/${encodeURIComponent(one.id)}`}>
                    {one.id}
                  </Link>
                )}
              </th>
              <td data-label="Result" className="whitespace-nowrap">
                {observable === undefined ? null : resultInWords(one, observable)}
              </td>
              <td data-label="Posted">{one.postedAt ? <Time at={one.postedAt} /> : null}</td>
              <td data-label="Counts">
                {one.setAside === null ? (
                  <span className="font-medium">counts</span>
                ) : (
                  <span>
                    set aside: <span className="text-quiet">{one.setAside.reason}</span>
                  </span>
                )}
              </td>
              <td data-label="What differs" className="text-[14px] [overflow-wrap:anywhere]">
                {itself ? null : <Differences differences={differences(measurement, one)} />}
              </td>
            </tr>
          );
        })}
      </Table>
    </>
  );
}

function Differences({ differences: found }: { differences: readonly Difference[] }) {
  if (found.length === 0) return <span className="text-quiet">the result alone</span>;
  return (
    <div>
      {found.map(({ field, here, there }) => (
        <div key={field}>
          {field}: {there ?? "not said"}{" "}
          <span className="text-quiet">and {here ?? "not said"}</span>
        </div>
      ))}
    </div>
  );
}
