"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useEffect, useRef, useState } from "react";
import { useForm, type DefaultValues, type FieldValues, type UseFormReturn } from "react-hook-form";
import { z } from "zod";
import { clearDraft, readDraft, saveDraft } from "./draft-store";

// The content policy allows no code from text, and Zod would try.
z.config({ jitless: true });

const saveAfterMs = 250;

export interface KeptDraft {
  /** When what was restored had been typed; null where nothing was. */
  restoredFrom: string | null;
  /** The browser refuses to keep anything. */
  notKept: boolean;
  /** Forgets the draft and empties the form. */
  startAfresh: () => void;
  /** Forgets the draft after it was sent. */
  sent: () => void;
}

/**
 * A form on the server's schema whose text is kept in this browser until it is sent.
 *
 * @param name of the draft: one per form and subject, `post-one:CAMPAIGN` say
 * @param afterSending whether the form is empty again, or keeps what was sent as what there is now
 */
export function useDraftForm<Values extends FieldValues, Content>(options: {
  name: string;
  defaults: Values;
  schema: z.ZodType<Content, Values>;
  afterSending?: "empty" | "keep";
}): { form: UseFormReturn<Values, unknown, Content>; draft: KeptDraft } {
  const { name, defaults, schema, afterSending = "empty" } = options;
  const form = useForm<Values, unknown, Content>({
    defaultValues: defaults as DefaultValues<Values>,
    resolver: zodResolver(schema as never) as never,
    mode: "onTouched",
    // An error that appears as a field is left would move the button that is just being pressed.
    delayError: 400,
  });
  const [restoredFrom, setRestoredFrom] = useState<string | null>(null);
  const [notKept, setNotKept] = useState(false);
  const blank = useRef(defaults);

  useEffect(() => {
    const kept = readDraft(localStorage, name, blank.current);
    if (kept === null) return;
    form.reset(kept.values, { keepDefaultValues: true });
    setRestoredFrom(kept.savedAt);
  }, [form, name]);

  useEffect(() => {
    // What the form starts from may change under it; what somebody typed is never touched.
    const before = blank.current;
    blank.current = defaults;
    if (!same(before, defaults) && same(form.getValues(), before)) form.reset(defaults);
  }, [form, defaults]);

  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | undefined;
    let pending: Values | null = null;
    const save = () => {
      clearTimeout(timer);
      if (pending === null) return;
      const draft = { savedAt: new Date().toISOString(), values: pending };
      pending = null;
      if (same(draft.values, blank.current)) clearDraft(localStorage, name);
      else setNotKept(!saveDraft(localStorage, name, draft));
    };
    const stop = form.subscribe({
      formState: { values: true },
      callback: ({ values }) => {
        pending = structuredClone(values);
        clearTimeout(timer);
        timer = setTimeout(save, saveAfterMs);
      },
    });
    window.addEventListener("pagehide", save);
    return () => {
      stop();
      save();
      window.removeEventListener("pagehide", save);
    };
  }, [form, name]);

  const forget = (values: Values) => {
    blank.current = values;
    form.reset(values);
    clearDraft(localStorage, name);
    setRestoredFrom(null);
  };
  return {
    form,
    draft: {
      restoredFrom,
      notKept,
      startAfresh: () => forget(defaults),
      sent: () => forget(afterSending === "keep" ? form.getValues() : defaults),
    },
  };
}

function same(a: unknown, b: unknown): boolean {
  return JSON.stringify(a) === JSON.stringify(b);
}
