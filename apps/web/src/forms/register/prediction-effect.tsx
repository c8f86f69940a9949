"use client";

import type { PredictionPreview } from "@weighhouse/engine/prediction-preview";
import { kassRaftery } from "@weighhouse/engine/kass-raftery";
import {
  formatFixed,
  formatInterval,
  formatNumber,
  formatPercent,
} from "@weighhouse/figures/numbers";
import type { ReactNode } from "react";
import { BandFigure } from "./band-figure";
import { unitAfter, type Quantity } from "./quantity";
import type { PreviewState } from "./use-preview";

/** What a prediction commits to: its band, what passes and fails, what a hit earns, a miss costs. */
export function PredictionEffect(props: { quantity: Quantity; state: PreviewState }) {
  const { quantity, state } = props;
  if (state.state === "refused") return <p className="text-[14px] text-rust">{state.words}</p>;
  if (state.state === "waiting")
    return (
      <p className="text-[14px] text-quiet">
        Give the expected value and the theory error to see what would pass and what would fail.
      </p>
    );
  return <Effect quantity={quantity} preview={state.preview} />;
}

function Effect({ quantity, preview }: { quantity: Quantity; preview: PredictionPreview }) {
  const unit = unitAfter(quantity);
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
            : `measured ${formatInterval(passes.lower, passes.upper)}${unit}`}
        </Line>
        <Line term="fails">{failWords(preview, unit)}</Line>
        <Line term="a hit earns">{weight(preview.hit.log10BayesFactor)}</Line>
        <Line term="a miss costs">
          {miss === null
            ? "nothing: no value measured like this would fail"
            : `${weight(miss.log10BayesFactor)}, at ${formatNumber(miss.value, 4)}${unit}`}
        </Line>
      </dl>
    </div>
  );
}

/** What silence on a quantity costs against a rival who speaks. */
export function SilenceEffect({ state }: { state: PreviewState }) {
  return (
    <p className="text-[14px] text-quiet">
      Silent: charged the no-model range, whatever is measured.
      {state.state === "ready" ? (
        <>
          {" "}
          A rival with an exact prediction that hits gains{" "}
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

function failWords({ fails }: PredictionPreview, unit: string): string {
  const ends = [
    fails.below === null ? null : `${formatNumber(fails.below, 4)}${unit} or less`,
    fails.above === null ? null : `${formatNumber(fails.above, 4)}${unit} or more`,
  ].filter((end) => end !== null);
  return ends.length === 0 ? "nothing measured like this" : `measured ${ends.join(", or ")}`;
}

function weight(log10BayesFactor: number): string {
  return `${signed(log10BayesFactor)} in log₁₀ B (${kassRaftery(log10BayesFactor)})`;
}

function signed(value: number): string {
  return value > 0 ? `+${formatFixed(value, 2)}` : formatFixed(value, 2);
}
