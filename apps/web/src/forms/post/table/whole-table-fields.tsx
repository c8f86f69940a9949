"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useFormContext, useWatch } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { FieldRow } from "../../form-frame";
import type { TableDraft } from "./table-draft";

/** What holds for all rows that don't say it themselves. */
export function WholeTableFields(props: { document: CampaignDocument; csv: boolean }) {
  const { document, csv } = props;
  const { register, formState } = useFormContext<TableDraft>();
  const { errors } = formState;
  const limitsAt = useWatch<TableDraft, "limitsAt">({ name: "limitsAt" });
  return (
    <>
      <FieldRow>
        <Choice label="Facility" error={errors.facility?.message} {...register("facility")}>
          <option value="">as each row says</option>
          {document.facilities.map(({ key, title }) => (
            <option key={key} value={key}>
              {title}
            </option>
          ))}
        </Choice>
        <Choice
          label="Quantity"
          gloss="measurand"
          error={errors.measurand?.message}
          {...register("measurand")}
        >
          <option value="">as each row says, or as it falls</option>
          {document.measurands.map(({ key, title }) => (
            <option key={key} value={key}>
              {title}
            </option>
          ))}
        </Choice>
        <Field
          label="Batch"
          gloss="a night, a run"
          autoComplete="off"
          error={errors.batch?.message}
          {...register("batch")}
        />
        <Choice label="Status" error={errors.status?.message} {...register("status")}>
          <option value="final">final</option>
          <option value="provisional">provisional</option>
        </Choice>
      </FieldRow>
      <FieldRow>
        <Choice label="Limits are stated at" {...register("limitsAt")}>
          <option value="">what the table says</option>
          <option value="confidence">a confidence</option>
          <option value="sigmas">a number of sigmas</option>
        </Choice>
        {limitsAt === "" ? null : (
          <Field
            label={limitsAt === "confidence" ? "Confidence" : "Sigmas"}
            gloss={limitsAt === "confidence" ? "such as 0.95" : "such as 3"}
            inputMode="decimal"
            autoComplete="off"
            error={errors.limitsNumber?.message}
            {...register("limitsNumber")}
          />
        )}
        {csv ? (
          <Choice label="Decimal sign" {...register("decimal")}>
            <option value="">as the table shows</option>
            <option value="point">point: 1.5</option>
            <option value="comma">comma: 1,5</option>
          </Choice>
        ) : null}
      </FieldRow>
    </>
  );
}
