import type { Pair } from "@weighhouse/campaign/standings";
import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import { HypothesisMark } from "@/look/hypothesis-mark";
import { Num, tailOf } from "@/look/number";
import { Table } from "@/look/table";
import type { RankedHypothesis } from "./table-rows";

/** The pairs with the leader, the others on demand: of twelve hypotheses there are 66. */
export function Pairs(props: { pairs: readonly Pair[]; hypotheses: RankedHypothesis[] }) {
  const placed = props.pairs.map((pair, index) => ({ pair, index }));
  const leader = props.hypotheses[0]?.key;
  const others = placed.filter(({ pair }) => pair.a !== leader);
  return (
    <>
      <PairsTable
        pairs={placed.filter(({ pair }) => pair.a === leader)}
        hypotheses={props.hypotheses}
      />
      {others.length > 0 ? (
        <details className="mt-3">
          <summary className="cursor-pointer text-quiet">
            Pairs without the leader ({others.length})
          </summary>
          <PairsTable pairs={others} hypotheses={props.hypotheses} />
        </details>
      ) : null}
    </>
  );
}

/** Each pair twice weighed: on everything, and on the common ground that both predict. */
export function PairsTable(props: {
  /** With their places in the standings' `pairs`. */
  pairs: readonly { pair: Pair; index: number }[];
  hypotheses: RankedHypothesis[];
}) {
  const byKey = new Map(props.hypotheses.map((each) => [each.key, each]));
  const whole = tailOf(props.pairs.map(({ pair }) => formatLog10B(pair.log10BayesFactor)));
  const common = tailOf(props.pairs.map(({ pair }) => commonText(pair)));
  return (
    <Table
      caption="Pairs of hypotheses"
      paired
      head={
        <tr>
          <th scope="col">For</th>
          <th scope="col">against</th>
          <th scope="col" className="number">
            log₁₀ B <br />
            <span className="gloss">on everything</span>
          </th>
          <th scope="col" className="number">
            log₁₀ B <br />
            <span className="gloss">on common ground</span>
          </th>
          <th scope="col" className="number">
            Measurements <br />
            <span className="gloss">on common ground</span>
          </th>
        </tr>
      }
    >
      {props.pairs.map(({ pair, index }) => (
        <tr key={`${pair.a} ${pair.b}`}>
          <th scope="row">
            <Name hypothesis={byKey.get(pair.a)} fallback={pair.a} />
          </th>
          <td data-label="against" data-whole>
            <span>
              <Name hypothesis={byKey.get(pair.b)} fallback={pair.b} />
            </span>
          </td>
          <td className="number" data-label="log₁₀ B">
            <Num
              text={formatLog10B(pair.log10BayesFactor)}
              exact={pair.log10BayesFactor}
              at={`/pairs/${index}/log10BayesFactor`}
              tail={whole}
            />
          </td>
          <td className="number" data-label="in common">
            <Num
              text={commonText(pair)}
              exact={pair.commonGround.log10BayesFactor}
              at={`/pairs/${index}/commonGround/log10BayesFactor`}
              tail={common}
              absent="no measurement that both predict"
            />
          </td>
          <td className="number" data-label="Measurements in common" data-whole>
            <Num
              text={String(pair.commonGround.measurements)}
              exact={pair.commonGround.measurements}
              at={`/pairs/${index}/commonGround/measurements`}
            />
          </td>
        </tr>
      ))}
    </Table>
  );
}

function Name(props: { hypothesis: RankedHypothesis | undefined; fallback: string }) {
  if (!props.hypothesis) return props.fallback;
  return (
    <>
      <HypothesisMark index={props.hypothesis.index} />
      {props.hypothesis.title}
    </>
  );
}

function commonText(pair: Pair): string | null {
  const { measurements, log10BayesFactor } = pair.commonGround;
  return measurements === 0 ? null : formatLog10B(log10BayesFactor);
}
