"use client";

import { get, useFormContext } from "react-hook-form";
import { Field } from "@/look/field";
import { followingKey } from "../entered-text";
import { FieldRow } from "../form-frame";

/** A title, and a key that follows it until somebody types a key of their own. */
export function TitleAndKey(props: { titleHelp?: string; keyHelp?: string; keyFixed?: boolean }) {
  const { register, setValue, getValues, getFieldState, formState } = useFormContext<{
    title: string;
    key: string;
  }>();
  const message = (name: string) => get(formState.errors, `${name}.message`) as string | undefined;
  const title = register("title");
  return (
    <FieldRow>
      <Field
        label="Title"
        help={props.titleHelp}
        autoComplete="off"
        error={message("title")}
        {...title}
        onChange={(event) => {
          const [key, before] = getValues(["key", "title"]);
          const next = followingKey(key, { before, now: event.target.value });
          void title.onChange(event);
          if (!props.keyFixed && next !== key)
            setValue("key", next, {
              shouldDirty: true,
              shouldValidate: getFieldState("key", formState).invalid,
            });
        }}
      />
      <Field
        label="Key"
        help={
          props.keyFixed
            ? "Stays for good."
            : (props.keyHelp ?? "Its name in files: a-z, 0-9 and -. Can’t change later.")
        }
        autoComplete="off"
        readOnly={props.keyFixed}
        error={message("key")}
        {...register("key")}
      />
    </FieldRow>
  );
}
