"use client";

import { useFormContext, useWatch } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { FieldRow } from "../form-frame";
import type { MeasurandDraft } from "./part-drafts";

/** What one would expect knowing none of the hypotheses; silence is charged this. */
export function ReferenceFields(props: { unit: string | null; spread: string | null }) {
  const { register, formState } = useFormContext<MeasurandDraft>();
  const family = useWatch<MeasurandDraft, "reference.family">({ name: "reference.family" });
  const errors = formState.errors.reference;
  const unit = props.unit ?? undefined;
  const number = { inputMode: "decimal", autoComplete: "off" } as const;
  return (
    <fieldset className="min-w-0 border-t border-rule pt-3">
      <legend className="font-serif text-[16px] font-semibold">
        No-model range <span className="gloss">reference</span>
      </legend>
      <p className="mb-3 max-w-[76ch] text-[13.5px] text-quiet">
        What one would expect knowing none of the hypotheses. A hypothesis that says nothing here is
        charged this range, so take it broad and defensible; it can’t change once there is a
        measurement.
      </p>
      <FieldRow>
        <Choice label="Shape of the range" {...register("reference.family")}>
          <option value="uniform">between two bounds</option>
          <option value="normal">normal, about a middle</option>
        </Choice>
        {family === "uniform" ? (
          <>
            <Field
              label="Lower bound"
              gloss={unit}
              {...number}
              error={errors?.lower?.message}
              {...register("reference.lower")}
            />
            <Field
              label="Upper bound"
              gloss={unit}
              {...number}
              error={errors?.upper?.message}
              {...register("reference.upper")}
            />
          </>
        ) : (
          <>
            <Field
              label="Middle"
              gloss={unit}
              {...number}
              error={errors?.mean?.message}
              {...register("reference.mean")}
            />
            <Field
              label="Spread"
              gloss={`standard deviation${props.spread ? `, ${props.spread}` : ""}`}
              {...number}
              error={errors?.sd?.message}
              {...register("reference.sd")}
            />
          </>
        )}
        <Field
          label="Scatter of the range"
          gloss={props.spread ?? undefined}
          help="0 if none."
          {...number}
          error={errors?.scatter?.message}
          {...register("reference.scatter")}
        />
      </FieldRow>
    </fieldset>
  );
}
