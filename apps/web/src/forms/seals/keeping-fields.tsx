"use client";

import { useFormContext } from "react-hook-form";
import { Choice, Field } from "@/look/field";
import { FieldRow } from "../form-frame";

/** How a seal is kept and until when, as its form holds it. */
export interface KeepingDraft {
  keeping: "held" | "kept";
  until: string;
}

/** Who keeps what is sealed, and until when. */
export function KeepingFields() {
  const { register, formState } = useFormContext<KeepingDraft>();
  const { errors } = formState;
  return (
    <FieldRow>
      <Choice
        label="Kept by"
        help="Held: opened here by itself. Kept: a file is saved in this browser; without it nobody can open the seal."
        error={errors.keeping?.message}
        {...register("keeping")}
      >
        <option value="held">this server, encrypted</option>
        <option value="kept">us, in a file</option>
      </Choice>
      <Field
        label="Sealed until"
        gloss="UTC"
        help="Held: opened then. Kept: you open it by then, or it stays shut for ever."
        placeholder="2031-03-01 09:30"
        autoComplete="off"
        error={errors.until?.message}
        {...register("until")}
      />
    </FieldRow>
  );
}
