"use client";

import { useFieldArray, useFormContext } from "react-hook-form";
import { Button } from "@/look/button";
import { Field } from "@/look/field";
import { FieldRow, FieldRowButton } from "../form-frame";
import type { MeasurandDraft, ThresholdDraft } from "./part-drafts";

/** Values that matter to somebody: the standings give the probability of lying above each. */
export function ThresholdFields({ unit }: { unit: string | null }) {
  const { register, control, formState } = useFormContext<MeasurandDraft>();
  const { fields, append, remove } = useFieldArray({ control, name: "thresholds" });
  const { errors, touchedFields, submitCount } = formState;
  // A new row is not at fault before somebody has been in it.
  const wrong = (index: number, name: keyof ThresholdDraft) =>
    submitCount > 0 || touchedFields.thresholds?.[index]?.[name]
      ? errors.thresholds?.[index]?.[name]?.message
      : undefined;
  return (
    <fieldset className="mb-3 min-w-0 border-t border-rule pt-3">
      <legend className="font-serif text-[16px] font-semibold">Thresholds</legend>
      <p className="mb-3 text-[13.5px] text-quiet">
        Values that matter to somebody. The standings give the probability of lying above each.
      </p>
      {fields.map((field, index) => (
        <fieldset key={field.id} className="min-w-0" aria-label={`Threshold ${index + 1}`}>
          <FieldRow>
            <Field
              label="Threshold title"
              autoComplete="off"
              error={wrong(index, "title")}
              {...register(`thresholds.${index}.title`)}
            />
            <Field
              label="Threshold key"
              autoComplete="off"
              error={wrong(index, "key")}
              {...register(`thresholds.${index}.key`)}
            />
            <Field
              label="Threshold value"
              gloss={unit ?? undefined}
              inputMode="decimal"
              autoComplete="off"
              error={wrong(index, "value")}
              {...register(`thresholds.${index}.value`)}
            />
            <FieldRowButton onClick={() => remove(index)}>
              Remove threshold {index + 1}
            </FieldRowButton>
          </FieldRow>
        </fieldset>
      ))}
      <Button onClick={() => append({ title: "", key: "", value: "" })}>Add a threshold</Button>
    </fieldset>
  );
}
