"use client";

import { useRouter } from "next/navigation";
import { useState, type ReactNode } from "react";
import { FormProvider, type FieldValues } from "react-hook-form";
import type { z } from "zod";
import { Notice } from "@/look/notice";
import { FormBody } from "../form-body";
import { DraftNote, FailureNote, SendRow } from "../form-frame";
import { useDraftForm } from "../use-draft-form";
import { useSending } from "../use-sending";

/** The form of one declaration: its fields, its button, and what came of it. */
export function PartForm<Values extends FieldValues, Content>(props: {
  /** Names the kept draft and the form: `observable:CAMPAIGN`. */
  name: string;
  label: string;
  button: string;
  defaults: Values;
  afterSending?: "empty" | "keep";
  schema: z.ZodType<Content, Values>;
  send: (content: Content) => Promise<unknown>;
  /** What to say once it is done, of what was sent. */
  done: (content: Content) => string;
  /** Where to go once it is done; else the page shows what is new and the form is empty again. */
  leaveTo?: (content: Content) => string;
  under?: RegExp;
  field?: (values: Values, path: (string | number)[]) => string;
  children: ReactNode;
}) {
  const router = useRouter();
  const [doneWords, setDoneWords] = useState<string | null>(null);
  const { form, draft } = useDraftForm({
    name: props.name,
    defaults: props.defaults,
    schema: props.schema,
    afterSending: props.afterSending,
  });
  const { submit, sending, failure } = useSending({
    form,
    draft,
    send: props.send,
    under: props.under,
    field: props.field,
    done: (_answer, content) => {
      setDoneWords(props.done(content));
      const next = props.leaveTo?.(content);
      if (next !== undefined) router.push(next);
      router.refresh();
    },
  });
  return (
    <FormProvider {...form}>
      <form
        noValidate
        aria-label={props.label}
        onSubmit={(event) => {
          setDoneWords(null);
          void submit(event);
        }}
      >
        <FormBody busy={sending}>
          <DraftNote draft={draft} />
          {props.children}
          <FailureNote failure={failure} />
          <SendRow sending={sending} label={props.button} />
        </FormBody>
        <output className="mt-2 block">
          {doneWords === null ? null : <Notice tone="good">{doneWords}</Notice>}
        </output>
      </form>
    </FormProvider>
  );
}
