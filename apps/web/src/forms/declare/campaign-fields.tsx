"use client";

import { useFormContext } from "react-hook-form";
import { Choice, Field, TextArea } from "@/look/field";
import { FieldRow } from "../form-frame";
import type { CampaignDraft } from "./part-drafts";
import { TitleAndKey } from "./title-and-key";

const timeHelp = "UTC, such as 2031-03-01 09:00.";

/** A campaign's own fields, for opening it and for changing it later. */
export function CampaignFields({ opened }: { opened: boolean }) {
  const { register, formState } = useFormContext<CampaignDraft>();
  const { errors } = formState;
  return (
    <>
      <TitleAndKey
        titleHelp="The question, in a line."
        keyHelp="Its place in addresses: a-z, 0-9 and -. Can’t change later."
        keyFixed={opened}
      />
      <TextArea
        label="Summary"
        help="What is puzzling, what is measured, who takes part."
        rows={3}
        error={errors.summary?.message}
        {...register("summary")}
      />
      <FieldRow>
        <Field
          label="Registration closes"
          help={`${timeHelp} Hypotheses registered later are marked as filed after data. Empty: open until you close it.`}
          autoComplete="off"
          error={errors.registrationCloses?.message}
          {...register("registrationCloses")}
        />
        <Field
          label="Data closes"
          help={`${timeHelp} Empty: no date.`}
          autoComplete="off"
          error={errors.dataCloses?.message}
          {...register("dataCloses")}
        />
        <Choice
          label="Seen by"
          help="Who may read the standings and the ledger."
          error={errors.visibility?.message}
          {...register("visibility")}
        >
          <option value="public">everybody</option>
          <option value="members">members only</option>
        </Choice>
      </FieldRow>
      <fieldset className="min-w-0 border-t border-rule pt-3">
        <legend className="font-serif text-[16px] font-semibold">The rule of verdicts</legend>
        <p className="mb-3 text-[13.5px] text-quiet">
          Agreed before data; it can’t change once a measurement is posted.
        </p>
        <FieldRow>
          <Field
            label="Coverage"
            help="How many standard deviations of theory error a prediction’s interval spans on either side."
            inputMode="decimal"
            error={errors.rule?.coverage?.message}
            {...register("rule.coverage")}
          />
          <Field
            label="Pass at"
            help="Passes when the true value lies inside with at least this probability."
            inputMode="decimal"
            error={errors.rule?.pass?.message}
            {...register("rule.pass")}
          />
          <Field
            label="Fail at"
            help="Fails when at most this probability is left on the prediction’s side of an end."
            inputMode="decimal"
            error={errors.rule?.fail?.message}
            {...register("rule.fail")}
          />
          <Field
            label="Weight of none of these"
            help="Above 0, “none of these” is ranked among the hypotheses."
            inputMode="decimal"
            error={errors.noneOfThese?.weight?.message}
            {...register("noneOfThese.weight")}
          />
        </FieldRow>
      </fieldset>
    </>
  );
}
