"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useFieldArray, useFormContext, useWatch } from "react-hook-form";
import { Button } from "@/look/button";
import { Choice, Field } from "@/look/field";
import { unitText } from "@/look/unit-text";
import { FieldRow, FieldRowButton } from "../form-frame";
import type { MeasurementDraft } from "./measurement-draft";

const typed = { autoComplete: "off" } as const;
const number = { inputMode: "decimal", autoComplete: "off" } as const;

export function MeasurementFields(props: {
  document: CampaignDocument;
  /** The id stands fast: it is a measurement that is there. */
  fixedId?: boolean;
  /** Nobody makes one here: it has to be given. */
  idNeeded?: boolean;
}) {
  const { document, fixedId = false, idNeeded = false } = props;
  const { register, formState } = useFormContext<MeasurementDraft>();
  const chosen = useWatch<MeasurementDraft, "measurand">({ name: "measurand" });
  const { errors } = formState;
  const measurand = document.measurands.find(({ key }) => key === chosen);
  const observable = document.observables.find(({ key }) => key === measurand?.observable);
  const unit = observable?.unit ?? undefined;
  const wrongInside = [errors.batch, errors.status, errors.source, errors.sameData, errors.id].some(
    (error) => error !== undefined,
  );
  return (
    <>
      <FieldRow>
        <Choice
          label="Quantity"
          gloss="measurand"
          error={errors.measurand?.message}
          {...register("measurand")}
        >
          <option value="">choose one</option>
          {document.measurands.map(({ key, title }) => (
            <option key={key} value={key}>
              {title}
            </option>
          ))}
        </Choice>
        <Choice label="Facility" error={errors.facility?.message} {...register("facility")}>
          <option value="">not said</option>
          {document.facilities.map(({ key, title }) => (
            <option key={key} value={key}>
              {title}
            </option>
          ))}
        </Choice>
        <Field
          label="Observed at"
          gloss="UTC"
          placeholder="2031-03-01 09:30"
          {...typed}
          error={errors.observedAt?.message}
          {...register("observedAt")}
        />
      </FieldRow>
      <FieldRow>
        <Field
          label="Value"
          gloss={unit === undefined ? undefined : unitText(unit)}
          {...number}
          error={errors.value?.message}
          {...register("value")}
        />
        <Field
          label="Uncertainty"
          gloss="one standard deviation, independent part"
          {...number}
          error={errors.sd?.message}
          {...register("sd")}
        />
        <Field
          label="Unit"
          gloss={unit === undefined ? undefined : `${unit} if empty`}
          {...typed}
          error={errors.unit?.message}
          {...register("unit")}
        />
      </FieldRow>
      <SharedErrors document={document} />
      <details className="mb-3" open={wrongInside || idNeeded || undefined}>
        <summary className="cursor-pointer text-[14.5px]">
          Batch, status, source{fixedId ? ", same data" : ", id"}
        </summary>
        <div className="mt-2">
          <FieldRow>
            <Field
              label="Batch"
              help="A night, a run: what shares errors drawn per batch."
              {...typed}
              error={errors.batch?.message}
              {...register("batch")}
            />
            <Choice label="Status" error={errors.status?.message} {...register("status")}>
              <option value="final">final</option>
              <option value="provisional">provisional</option>
            </Choice>
            <Field
              label="Source"
              help="A DOI, an address, or the digest of a file."
              {...typed}
              error={errors.source?.message}
              {...register("source")}
            />
          </FieldRow>
          <FieldRow>
            <Field
              label="Same data as"
              help="One name for all results from the same data, so that none counts twice unseen."
              {...typed}
              error={errors.sameData?.message}
              {...register("sameData")}
            />
            {fixedId ? null : (
              <Field
                label="Id"
                help={
                  idNeeded
                    ? "It is shown once the seal is open: 1 to 200 of A-Z, a-z, 0-9, . _ : and -."
                    : "Made from facility, time and content if empty."
                }
                {...typed}
                error={errors.id?.message}
                {...register("id")}
              />
            )}
          </FieldRow>
        </div>
      </details>
    </>
  );
}

/** The declared shared errors that this measurement carries, with how strongly. */
function SharedErrors({ document }: { document: CampaignDocument }) {
  const { control, register, formState } = useFormContext<MeasurementDraft>();
  const { fields, append, remove } = useFieldArray({ control, name: "shared" });
  const errors = formState.errors.shared;
  const first = document.sharedErrors[0];
  if (first === undefined) return null;
  return (
    <fieldset className="mb-3 min-w-0">
      <legend className="mb-1 font-medium">Shared errors</legend>
      {fields.map((field, index) => (
        <FieldRow key={field.id}>
          <Choice
            label={`Shared error ${index + 1}`}
            error={errors?.[index]?.error?.message}
            {...register(`shared.${index}.error`)}
          >
            {document.sharedErrors.map(({ key, title }) => (
              <option key={key} value={key}>
                {title}
              </option>
            ))}
          </Choice>
          <Field
            label={`Coefficient ${index + 1}`}
            {...number}
            error={errors?.[index]?.coefficient?.message}
            {...register(`shared.${index}.coefficient`)}
          />
          <FieldRowButton onClick={() => remove(index)}>
            Remove shared error {index + 1}
          </FieldRowButton>
        </FieldRow>
      ))}
      <Button onClick={() => append({ error: first.key, coefficient: "1" })}>
        Add a shared error
      </Button>
    </fieldset>
  );
}
