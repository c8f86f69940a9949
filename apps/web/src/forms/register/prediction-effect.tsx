"use client";

import type { PredictionPreview } from "@weighhouse/engine/prediction-preview";
import { kassRaftery } from "@weighhouse/engine/kass-raftery";
import {
  formatFixed,
  formatInterval,
  formatPercent,
  formatNumber,
} from "@weighhouse/figures/numbers";
import type { ReactNode } from "react";
import { BandFigure } from "./band-figure";
import { formatReading, spreadUnit, unitAfter, type Quantity } from "./quantity";
import type { PreviewState } from "./use-preview";

/** What a prediction commits to: its band, what passes and fails, what a hit earns, a miss costs. */
export function PredictionEffect(props: {
  quantity: Quantity;
  state: PreviewState;
  /** The uncertainty that the measurement is supposed to have; readings are rounded to it. */
  sd: number | null;
}) {
  const { quantity, state } = props;
  if (state.state === "refused") return <p className="text-[14px] text-rust">{state.words}</p>;
  if (state.state === "waiting")
    return (
      <p className="text-[14px] text-quiet">
        Give the expected value and the theory error to see what would pass and what would fail.
      </p>
    );
  return <Effect quantity={quantity} preview={state.preview} sd={props.sd} />;
}

function Effect(props: { quantity: Quantity; preview: PredictionPreview; sd: number | null }) {
  const { quantity, preview } = props;
  const unit = unitAfter(quantity);
  const reading = (value: number) => formatReading(value, props.sd, quantity);
  const { interval, passes, miss } = preview;
  const exact = interval.lower === interval.upper;
  return (
    <div aria-live="polite">
      <BandFigure quantity={quantity} preview={preview} />
      <dl className="grid grid-cols-[auto_1fr] gap-x-4 gap-y-0.5 text-[14px]">
        <Line term="true value">
          {exact ? "exactly " : ""}
          {formatInterval(interval.lower, interval.upper)}
          {unit}
          {exact ? "" : `, ${formatPercent(preview.shareOfReference)} of the no-model range`}
        </Line>
        <Line term="passes">
          {passes === null
            ? "nothing: a measurement this coarse can’t decide for you"
            : `measured ${rangeWords(passes, reading)}${unit}`}
        </Line>
        <Line term="fails">{failWords(preview, (value) => `${reading(value)}${unit}`)}</Line>
        <Line term="a hit earns">{weight(preview.hit.log10BayesFactor)}</Line>
        <Line term="a miss costs">
          {miss === null
            ? "nothing: no value measured like this would fail"
            : `${weight(miss.log10BayesFactor)}, at ${reading(miss.value)}${unit}`}
        </Line>
      </dl>
    </div>
  );
}

/** What silence on a quantity costs against a rival who speaks. */
export function SilenceEffect(props: {
  quantity: Quantity;
  state: PreviewState;
  sd: number | null;
}) {
  const { quantity, state, sd } = props;
  return (
    <p className="text-[14px] text-quiet">
      Silent: charged the no-model range, whatever is measured.
      {state.state === "ready" ? (
        <>
          {" "}
          A rival with an exact prediction that hits
          {sd === null ? "" : `, measured to ${formatNumber(sd)} ${spreadUnit(quantity)}`}, gains{" "}
          <strong className="font-semibold text-ink">
            {signed(state.preview.hit.log10BayesFactor)}
          </strong>{" "}
          in log<sub>10</sub> B on you ({kassRaftery(state.preview.hit.log10BayesFactor)}).
        </>
      ) : null}
    </p>
  );
}

function Line({ term, children }: { term: string; children: ReactNode }) {
  return (
    <>
      <dt className="whitespace-nowrap text-quiet">{term}</dt>
      <dd className="min-w-0">{children}</dd>
    </>
  );
}

type Reading = (value: number) => string;

function rangeWords(range: { lower: number | null; upper: number | null }, reading: Reading) {
  if (range.lower === null)
    return range.upper === null ? "anything" : `${reading(range.upper)} or less`;
  if (range.upper === null) return `${reading(range.lower)} or more`;
  return `${reading(range.lower)} to ${reading(range.upper)}`;
}

function failWords({ fails }: PredictionPreview, reading: Reading): string {
  const ends = [
    fails.below === null ? null : `${reading(fails.below)} or less`,
    fails.above === null ? null : `${reading(fails.above)} or more`,
  ].filter((end) => end !== null);
  return ends.length === 0 ? "nothing measured like this" : `measured ${ends.join(", or ")}`;
}

function weight(log10BayesFactor: number): string {
  return `${signed(log10BayesFactor)} in log₁₀ B (${kassRaftery(log10BayesFactor)})`;
}

function signed(value: number): string {
  return value > 0 ? `+${formatFixed(value, 2)}` : formatFixed(value, 2);
}
