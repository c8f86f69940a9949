"use client";

import { Field } from "@/look/field";

/** A file whose text the page reads; the same file can be chosen again once it was corrected. */
export function TextFileField(props: {
  label: string;
  help: string;
  accept: string;
  onText: (text: string) => void;
}) {
  return (
    <Field
      label={props.label}
      type="file"
      accept={props.accept}
      help={props.help}
      onClick={(event) => {
        event.currentTarget.value = "";
      }}
      onChange={(event) => {
        const file = event.target.files?.[0];
        if (file !== undefined) void file.text().then(props.onText);
      }}
    />
  );
}
