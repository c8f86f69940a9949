import type { Parameter, Prior } from "@weighhouse/campaign/document";
import type { HypothesisStanding } from "@weighhouse/campaign/standings";
import { formatInterval, formatNumber } from "@weighhouse/figures/numbers";
import { unitOf } from "@/campaign/plain-words";
import { Measured } from "@/look/measured";
import { Num } from "@/look/number";
import { Table } from "@/look/table";

/** Parameters with their prior, and what the data made of them. */
export function ParameterRows(props: {
  parameters: readonly Parameter[];
  estimates: HypothesisStanding["parameters"];
  /** JSON Pointer of the estimates. */
  at: string;
}) {
  return (
    <Table
      caption="Parameters"
      head={
        <tr>
          <th scope="col">Parameter</th>
          <th scope="col">Prior</th>
          <th scope="col">
            Posterior <span className="gloss">mean ± sd</span>
          </th>
          <th scope="col">
            Quantiles <span className="gloss">2.5, 50, 97.5 %</span>
          </th>
        </tr>
      }
    >
      {props.parameters.map((parameter) => {
        const place = props.estimates.findIndex((each) => each.key === parameter.key);
        const estimate = props.estimates[place];
        return (
          <tr key={parameter.key}>
            <th scope="row">
              {parameter.title} <code className="text-quiet">{parameter.key}</code>
            </th>
            <td data-label="Prior">
              {priorInWords(parameter.prior)}
              {unitOf(parameter)}
            </td>
            <td data-label="Posterior">
              {estimate ? (
                <Measured
                  value={estimate.mean}
                  sd={estimate.sd}
                  scale="linear"
                  unit={parameter.unit}
                  at={`${props.at}/${place}`}
                  valueName="mean"
                />
              ) : null}
            </td>
            <td data-label="Quantiles">
              {estimate ? (
                <span className="inline-flex gap-3">
                  {estimate.quantiles.map((quantile, index) => (
                    <Num
                      // The three quantiles have places, not names.
                      // oxlint-disable-next-line react/no-array-index-key
                      key={index}
                      text={formatNumber(quantile, 4)}
                      exact={quantile}
                      at={`${props.at}/${place}/quantiles/${index}`}
                    />
                  ))}
                </span>
              ) : null}
            </td>
          </tr>
        );
      })}
    </Table>
  );
}

function priorInWords(prior: Prior): string {
  switch (prior.family) {
    case "normal":
      return `normal, ${formatNumber(prior.mean)} ± ${formatNumber(prior.sd)}`;
    case "lognormal":
      return `lognormal, median ${formatNumber(prior.median)}, ${formatNumber(prior.sdLog10)} dex`;
    case "uniform":
      return `${formatInterval(prior.lower, prior.upper)}, all alike`;
    case "loguniform":
      return `${formatInterval(prior.lower, prior.upper)}, all alike in log`;
    case "halfnormal":
      return `half-normal, sd ${formatNumber(prior.sd)}`;
    case "fixed":
      return `fixed at ${formatNumber(prior.value)}`;
  }
}
