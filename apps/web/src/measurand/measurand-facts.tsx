import type { Measurand, Observable } from "@weighhouse/campaign/document";
import type { MeasurandStanding } from "@weighhouse/campaign/standings";
import { formatNumber } from "@weighhouse/figures/numbers";
import { formatChiSquareAlone, formatPosterior } from "@weighhouse/figures/standing-numbers";
import { formatWindow } from "@weighhouse/figures/times";
import { conditionsInWords, referenceInWords, unitOf } from "@/campaign/plain-words";
import { Measured } from "@/look/measured";
import { Num } from "@/look/number";
import { unitText } from "@/look/unit-text";

/** The declaration of a quantity, and what its measurements say taken together. */
export function MeasurandFacts(props: {
  measurand: Measurand;
  observable: Observable;
  standing: MeasurandStanding | null;
  /** JSON Pointer of the standing. */
  at: string;
}) {
  const { measurand, observable, standing, at } = props;
  return (
    <dl className="facts">
      <dt>Key</dt>
      <dd>
        <code>{measurand.key}</code>
      </dd>
      <dt>Kind (observable)</dt>
      <dd>
        {observable.title}, {observable.unit ? unitText(observable.unit) : "no unit"},{" "}
        {observable.scale === "log10" ? "log₁₀" : observable.scale} scale
      </dd>
      <dt>Window</dt>
      <dd>
        {formatWindow(measurand.window.from, measurand.window.to)}
        {conditionsInWords(measurand, observable).map((words) => (
          <div key={words}>{words}</div>
        ))}
      </dd>
      <dt>Shape</dt>
      <dd>
        {measurand.shape === "constant" ? "one true value in its window" : "varies with conditions"}
        {measurand.scatter > 0 ? `, scatter ${formatNumber(measurand.scatter)}` : ""}
      </dd>
      <dt>No-model range (reference)</dt>
      <dd>{referenceInWords(measurand.reference, observable)}</dd>
      {standing?.combined ? (
        <Together combined={standing.combined} observable={observable} at={`${at}/combined`} />
      ) : null}
      {measurand.thresholds.map((threshold, index) => (
        <Threshold
          key={threshold.key}
          title={`${threshold.title}: above ${formatNumber(threshold.value)}${unitOf(observable)}`}
          above={standing?.thresholds[index]?.probabilityAbove ?? null}
          at={`${at}/thresholds/${index}/probabilityAbove`}
        />
      ))}
      {measurand.closed ? (
        <>
          <dt>Closed</dt>
          <dd>
            {measurand.closed.reason}
            {measurand.closed.replacedBy ? `; see ${measurand.closed.replacedBy}` : ""}
          </dd>
        </>
      ) : null}
    </dl>
  );
}

function Together(props: {
  combined: NonNullable<MeasurandStanding["combined"]>;
  observable: Observable;
  at: string;
}) {
  const { combined, observable, at } = props;
  return (
    <>
      <dt>Taken together</dt>
      <dd>
        <Measured
          value={combined.value}
          sd={combined.sd}
          scale={observable.scale}
          unit={observable.unit}
          at={at}
        />
      </dd>
      {combined.chiSquare === null || combined.degreesOfFreedom === null ? null : (
        <>
          <dt>Do they agree?</dt>
          <dd>
            χ²{" "}
            <Num
              text={formatChiSquareAlone(combined.chiSquare)}
              exact={combined.chiSquare}
              at={`${at}/chiSquare`}
            />{" "}
            / dof{" "}
            <Num
              text={String(combined.degreesOfFreedom)}
              exact={combined.degreesOfFreedom}
              at={`${at}/degreesOfFreedom`}
            />
            {combined.birgeRatio === null ? null : (
              <>
                , Birge ratio{" "}
                <Num
                  text={formatNumber(combined.birgeRatio, 3)}
                  exact={combined.birgeRatio}
                  at={`${at}/birgeRatio`}
                />
              </>
            )}
          </dd>
        </>
      )}
    </>
  );
}

function Threshold(props: { title: string; above: number | null; at: string }) {
  return (
    <>
      <dt>{props.title}</dt>
      <dd>
        {props.above === null ? (
          "no probability yet"
        ) : (
          <>
            probability{" "}
            <Num text={formatPosterior(props.above)} exact={props.above} at={props.at} />
          </>
        )}
      </dd>
    </>
  );
}
