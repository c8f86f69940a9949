"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { get, useFormContext, useWatch } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { Time } from "@/look/time";
import { FieldRow, Tick } from "../form-frame";
import type { HypothesisDraft } from "./hypothesis-draft";
import { PredictionEffect, SilenceEffect } from "./prediction-effect";
import { requestOfDraft, requestOfRival } from "./preview-request";
import { referenceWords, spreadUnit, supposedSd, unitAfter, type Quantity } from "./quantity";
import { usePreview } from "./use-preview";

/** One quantity of the campaign: silence or a prediction, with what either means in numbers. */
export function PredictionCard(props: {
  document: CampaignDocument;
  quantity: Quantity;
  index: number;
  /** It speaks, under a seal: there is no silence to choose. */
  sealing?: boolean;
}) {
  const { document, quantity, index, sealing = false } = props;
  const { register, formState } = useFormContext<HypothesisDraft>();
  const draft = useWatch<HypothesisDraft, `predictions.${number}`>({
    name: `predictions.${index}`,
  });
  const fallbackSd = supposedSd(document, quantity);
  const speaks = draft.says === "number";
  const request = speaks
    ? requestOfDraft(draft, fallbackSd)
    : requestOfRival(quantity, draft, fallbackSd);
  const preview = usePreview(document, request);
  const at = `predictions.${index}` as const;
  const wrong = (name: string): string | undefined =>
    get(formState.errors, `${at}.${name}.message`) as string | undefined;
  const { measurand } = quantity;
  return (
    <fieldset className="min-w-0 border-t border-rule py-4 first:border-t-0 first:pt-0">
      <legend className="sr-only">{measurand.title}</legend>
      <div aria-hidden="true" className="font-serif text-[16px] font-semibold">
        {measurand.title}
      </div>
      <p className="mb-2 text-[13.5px] text-quiet">
        <WindowWords quantity={quantity} /> No-model range: {referenceWords(quantity)}.
        {measurand.firstPostedAt === null ? null : (
          <strong className="font-medium text-brass">
            {" "}
            Already measured: a prediction here is filed after data, listed, and counted as silence.
          </strong>
        )}
      </p>
      {sealing ? null : (
        <div className="mb-3 flex flex-wrap gap-x-6 gap-y-1">
          <Side label="We say nothing" value="silent" field={register(`${at}.says`)} />
          <Side label="We predict a value" value="number" field={register(`${at}.says`)} />
        </div>
      )}
      <div className={speaks ? "grid gap-x-8 md:grid-cols-[1.1fr_1fr]" : ""}>
        {speaks ? (
          <div className="min-w-0">
            <FieldRow>
              <Field
                label="Expected value"
                gloss={unitAfter(quantity).trim()}
                inputMode="decimal"
                autoComplete="off"
                error={wrong("expected")}
                {...register(`${at}.expected`)}
              />
              <Choice label="Theory error" gloss="tolerance" {...register(`${at}.tolerance`)}>
                <option value="normal">a standard deviation</option>
                <option value="exact">none: the value is exact</option>
              </Choice>
            </FieldRow>
            {draft.tolerance === "normal" ? (
              <FieldRow>
                <Field
                  label="Standard deviation"
                  gloss={spreadUnit(quantity)}
                  inputMode="decimal"
                  autoComplete="off"
                  error={wrong("sd")}
                  {...register(`${at}.sd`)}
                />
                <Choice
                  label="Repeated measurements share it"
                  error={wrong("sharing")}
                  {...register(`${at}.sharing`)}
                >
                  <option value="common">yes, the same error each time</option>
                  <option value="each">no, a new error each time</option>
                </Choice>
              </FieldRow>
            ) : null}
            <Tick
              label="Decisive"
              help="We give the hypothesis up if this one fails; listed by name in the standings."
              {...register(`${at}.decisive`)}
            />
          </div>
        ) : null}
        <div className="min-w-0">
          {speaks ? (
            <PredictionEffect quantity={quantity} state={preview} sd={request?.sd ?? null} />
          ) : (
            <SilenceEffect quantity={quantity} state={preview} sd={request?.sd ?? null} />
          )}
          <SupposedSd
            quantity={quantity}
            fallback={fallbackSd}
            field={register(`${at}.supposedSd`)}
            shown={speaks}
          />
        </div>
      </div>
    </fieldset>
  );
}

type Registered = ReturnType<ReturnType<typeof useFormContext<HypothesisDraft>>["register"]>;

function Side(props: { label: string; value: string; field: Registered }) {
  return (
    <label className="inline-flex items-center gap-2">
      <input type="radio" value={props.value} className="size-4 accent-brass" {...props.field} />
      {props.label}
    </label>
  );
}

function SupposedSd(props: {
  quantity: Quantity;
  fallback: number | null;
  field: Registered;
  shown: boolean;
}) {
  if (!props.shown) return null;
  return (
    <label className="mt-2 flex flex-wrap items-baseline gap-2 text-[13.5px] text-quiet">
      if measured with uncertainty
      <input
        inputMode="decimal"
        autoComplete="off"
        placeholder={props.fallback === null ? "" : String(props.fallback)}
        className="w-24 rounded-sheet border border-edge bg-sheet px-2 py-0.5 text-ink placeholder:text-quiet"
        {...props.field}
      />
      {spreadUnit(props.quantity)}
    </label>
  );
}

function WindowWords({ quantity }: { quantity: Quantity }) {
  const { from, to } = quantity.measurand.window;
  if (from === null && to === null) return "Any time.";
  return (
    <>
      {from === null ? "Until " : <Time at={from} dateOnly />}
      {from !== null && to !== null ? " to " : from === null ? "" : " on"}
      {to === null ? null : <Time at={to} dateOnly />}.
    </>
  );
}
