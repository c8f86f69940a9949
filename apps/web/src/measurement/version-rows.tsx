import { kindInWords } from "@weighhouse/campaign/kind-words";
import type { Measurement, Observable } from "@weighhouse/campaign/document";
import type { MeasurementVersion } from "@weighhouse/desk/read-measurement-history";
import Link from "next/link";
import { resultInWords } from "@/campaign/plain-words";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

/** All that a measurement ever was, the newest first. */
export function VersionRows(props: {
  versions: readonly MeasurementVersion[];
  observables: ReadonlyMap<string, Observable>;
  path: string;
}) {
  return (
    <Table
      caption="History of this measurement"
      stackBelow="middle"
      head={
        <tr>
          <th scope="col" className="number">
            Entry
          </th>
          <th scope="col">What</th>
          <th scope="col">Result</th>
          <th scope="col">Observed</th>
          <th scope="col">Why</th>
          <th scope="col">By</th>
        </tr>
      }
    >
      {props.versions.toReversed().map((version) => (
        <tr key={version.seq}>
          <th scope="row" className="number">
            <Link className="link" href={`${props.path}/${version.seq}`}>
              <span className="sm:hidden">Entry </span>
              {version.seq}
            </Link>
          </th>
          <td data-label="What">
            <span>
              {kindInWords(version.kind)}, <Time at={version.at} />
            </span>
          </td>
          <td data-label="Result">
            <Result version={version} observables={props.observables} />
          </td>
          <td data-label="Observed">
            {version.measurement.observedAt ? <Time at={version.measurement.observedAt} /> : null}
          </td>
          <td data-label="Why" className="[overflow-wrap:anywhere]">
            {version.reason}
          </td>
          <td data-label="By">
            <span>
              {version.name ?? <span className="text-quiet">a person no longer named</span>}
              {version.team ? <span className="text-quiet">, {version.team}</span> : null}
            </span>
          </td>
        </tr>
      ))}
    </Table>
  );
}

function Result(props: {
  version: MeasurementVersion;
  observables: ReadonlyMap<string, Observable>;
}) {
  const { measurement, withdrawn } = props.version;
  const observable = props.observables.get(measurement.measurand);
  if (observable === undefined) return null;
  const { claimed: _, ...content } = measurement;
  const words = resultInWords(content satisfies Measurement, observable);
  const out = withdrawn || measurement.setAside !== null;
  return <span className={out ? "line-through decoration-quiet" : "font-medium"}>{words}</span>;
}
