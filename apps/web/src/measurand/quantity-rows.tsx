import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { formatWindow } from "@weighhouse/figures/times";
import { KeptLink } from "@/look/kept-link";
import { conditionsInWords, referenceInWords } from "@/campaign/plain-words";
import { Measured } from "@/look/measured";
import { Num } from "@/look/number";
import { Table } from "@/look/table";
import { inWindowOrder } from "@/standings/table-rows";

/** The quantities as a table: window, no-model range, how many measurements and what they say. */
export function QuantityRows(props: {
  document: CampaignDocument;
  standings: Standings | null;
  campaignKey: string;
}) {
  const { document, standings } = props;
  const observables = new Map(document.observables.map((each) => [each.key, each]));
  const places = new Map(standings?.measurands.map((each, place) => [each.key, place]));
  return (
    <Table
      caption="Quantities"
      stackBelow="broad"
      head={
        <tr>
          <th scope="col">Quantity</th>
          <th scope="col">Kind</th>
          <th scope="col">Window</th>
          <th scope="col">
            No-model range <span className="gloss">reference</span>
          </th>
          <th scope="col" className="number">
            Measurements
          </th>
          <th scope="col">Together</th>
        </tr>
      }
    >
      {inWindowOrder(document.measurands).map((measurand) => {
        const observable = observables.get(measurand.observable);
        const place = places.get(measurand.key);
        const standing = place === undefined ? undefined : standings?.measurands[place];
        if (!observable) return null;
        return (
          <tr key={measurand.key}>
            <th scope="row">
              <KeptLink
                className="link font-semibold"
                href={`/campaigns/${props.campaignKey}/quantities/${measurand.key}`}
              >
                {measurand.title}
              </KeptLink>
              {measurand.closed ? (
                <span className="gloss"> closed: {measurand.closed.reason}</span>
              ) : null}
            </th>
            <td data-label="Kind">
              <span>
                {observable.title}
                <span className="text-quiet">
                  {measurand.shape === "curve" ? ", a curve" : ""}
                  {observable.scale === "log10" ? ", on a log₁₀ scale" : ""}
                </span>
              </span>
            </td>
            <td data-label="Window" className="lg:whitespace-nowrap">
              <span>
                {formatWindow(measurand.window.from, measurand.window.to)}
                {conditionsInWords(measurand, observable).map((words) => (
                  <span key={words} className="block text-[13.5px] text-quiet">
                    {words}
                  </span>
                ))}
              </span>
            </td>
            <td data-label="No-model range">{referenceInWords(measurand.reference, observable)}</td>
            <td data-label="Measurements" className="number">
              {standing ? (
                <Num
                  text={String(standing.measurements)}
                  exact={standing.measurements}
                  at={`/measurands/${place}/measurements`}
                />
              ) : (
                <span className="text-quiet">–</span>
              )}
            </td>
            <td data-label="Together">
              {standing?.combined ? (
                <Measured
                  value={standing.combined.value}
                  sd={standing.combined.sd}
                  scale={observable.scale}
                  unit={observable.unit}
                  at={`/measurands/${place}/combined`}
                />
              ) : (
                <span className="text-quiet">not yet</span>
              )}
            </td>
          </tr>
        );
      })}
    </Table>
  );
}
