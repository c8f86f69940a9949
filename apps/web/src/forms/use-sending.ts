"use client";

import { useState } from "react";
import type { FieldValues, Path, UseFormReturn } from "react-hook-form";
import type { KeptDraft } from "./use-draft-form";
import { placeProblems, refusalOf } from "./refusal";

export interface Failure {
  message: string;
  signedOut: boolean;
  /** What the server said of places that the form has no field for. */
  loose: string[];
}

/**
 * Sends a form's content: refusals go to their fields, everything typed stays, and the draft is
 * forgotten only when the server has taken it.
 */
export function useSending<Values extends FieldValues, Content, Answer>(options: {
  form: UseFormReturn<Values, unknown, Content>;
  draft: KeptDraft;
  send: (content: Content) => Promise<Answer>;
  done: (answer: Answer, content: Content) => void;
  /** The part of the server's pointers that leads to the form's content. */
  under?: RegExp;
  field?: (values: Values, path: (string | number)[]) => string;
}) {
  const { form, draft, send, done, under = /^$/, field } = options;
  const [failure, setFailure] = useState<Failure | null>(null);
  const [sending, setSending] = useState(false);

  const submit = form.handleSubmit(
    async (content) => {
      setFailure(null);
      setSending(true);
      try {
        const answer = await send(content);
        draft.sent();
        done(answer, content);
      } catch (error) {
        const refusal = refusalOf(error);
        const values = form.getValues();
        const { placed, loose } = placeProblems(refusal.problems, {
          under,
          field: (path) => field?.(values, path) ?? path.join("."),
          isField: (name) => isLeaf(form.getValues(name as Path<Values>)),
        });
        for (const { field: name, message } of placed)
          form.setError(name as Path<Values>, { type: "server", message });
        const first = placed[0];
        if (first !== undefined) form.setFocus(first.field as Path<Values>);
        setFailure({ message: refusal.message, signedOut: refusal.signedOut, loose });
      } finally {
        setSending(false);
      }
    },
    () => setFailure(null),
  );

  return { submit, sending, failure };
}

function isLeaf(value: unknown): boolean {
  return ["string", "boolean", "number"].includes(typeof value);
}
