import type { CampaignDocument, Measurement, Observable } from "@weighhouse/campaign/document";
import { formatNumber } from "@weighhouse/figures/numbers";
import { resultInWords } from "@/campaign/plain-words";
import { KeptLink } from "@/look/kept-link";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

/** The measurements of one quantity as they were posted. */
export function MeasurementRows(props: {
  measurements: readonly Measurement[];
  observable: Observable;
  facilities: CampaignDocument["facilities"];
  sharedErrors: CampaignDocument["sharedErrors"];
  base: string;
}) {
  const errors = new Map(props.sharedErrors.map((each) => [each.key, each.title]));
  const facilities = new Map(props.facilities.map((each) => [each.key, each.title]));
  return (
    <Table
      caption="Measurements"
      stackBelow="middle"
      head={
        <tr>
          <th scope="col">Result</th>
          <th scope="col">Facility</th>
          <th scope="col">Observed</th>
          <th scope="col">Posted</th>
          <th scope="col">Id</th>
        </tr>
      }
    >
      {props.measurements.map((measurement) => (
        <tr key={measurement.id}>
          <th scope="row" className="whitespace-nowrap">
            <span
              className={measurement.setAside ? "line-through decoration-quiet" : "font-medium"}
            >
              {resultInWords(measurement, props.observable)}
            </span>
            <Remarks measurement={measurement} errors={errors} />
          </th>
          <td data-label="Facility">
            {measurement.facility
              ? (facilities.get(measurement.facility) ?? measurement.facility)
              : null}
          </td>
          <td data-label="Observed">
            {measurement.observedAt ? <Time at={measurement.observedAt} /> : null}
          </td>
          <td data-label="Posted">
            {measurement.postedAt ? <Time at={measurement.postedAt} /> : null}
          </td>
          <td data-label="Id" className="min-w-[16ch]">
            <KeptLink
              className="link font-mono text-[0.92em]"
              href={`${props.base}/measurements/${encodeURIComponent(measurement.id)}`}
            >
              {measurement.id}
            </KeptLink>
          </td>
        </tr>
      ))}
    </Table>
  );
}

function Remarks(props: { measurement: Measurement; errors: Map<string, string | null> }) {
  const { measurement } = props;
  const shared = (key: string) => `“${props.errors.get(key) ?? key}”`;
  const remarks = [
    measurement.setAside ? `set aside: ${measurement.setAside.reason}` : null,
    measurement.status === "provisional" ? "provisional" : null,
    ...Object.entries(measurement.conditions).map(([key, at]) => `${key} ${formatNumber(at)}`),
    ...measurement.shared.map(({ error, coefficient }) =>
      coefficient === 1
        ? `shares ${shared(error)}`
        : `shares ${formatNumber(coefficient)} × ${shared(error)}`,
    ),
    measurement.sameData ? `same data as ${measurement.sameData}` : null,
  ].filter((remark) => remark !== null);
  if (remarks.length === 0) return null;
  return (
    <span className="block text-[13px] whitespace-normal text-quiet">{remarks.join("; ")}</span>
  );
}
