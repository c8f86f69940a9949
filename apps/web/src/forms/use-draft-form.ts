"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useEffect, useState } from "react";
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
 * @param name of the draft: one per form and subject, `post:CAMPAIGN` say
 */
export function useDraftForm<Values extends FieldValues, Content>(options: {
  name: string;
  defaults: Values;
  schema: z.ZodType<Content, Values>;
}): { form: UseFormReturn<Values, unknown, Content>; draft: KeptDraft } {
  const { name, defaults, schema } = options;
  const form = useForm<Values, unknown, Content>({
    defaultValues: defaults as DefaultValues<Values>,
    resolver: zodResolver(schema as never) as never,
    mode: "onTouched",
  });
  const [restoredFrom, setRestoredFrom] = useState<string | null>(null);
  const [notKept, setNotKept] = useState(false);

  useEffect(() => {
    const kept = readDraft(localStorage, name, defaults);
    if (kept === null) return;
    form.reset(kept.values, { keepDefaultValues: true });
    setRestoredFrom(kept.savedAt);
    // Only on arrival: afterwards the form is newer than the draft.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [name]);

  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | undefined;
    let pending: Values | null = null;
    const save = () => {
      if (pending !== null)
        setNotKept(
          !saveDraft(localStorage, name, { savedAt: new Date().toISOString(), values: pending }),
        );
      pending = null;
    };
    const stop = form.subscribe({
      formState: { values: true, isDirty: true },
      callback: ({ values, isDirty }) => {
        if (isDirty === false) return;
        pending = structuredClone(values);
        clearTimeout(timer);
        timer = setTimeout(save, saveAfterMs);
      },
    });
    window.addEventListener("pagehide", save);
    return () => {
      stop();
      clearTimeout(timer);
      save();
      window.removeEventListener("pagehide", save);
    };
  }, [form, name]);

  const forget = () => {
    clearDraft(localStorage, name);
    setRestoredFrom(null);
  };
  return {
    form,
    draft: {
      restoredFrom,
      notKept,
      startAfresh: () => {
        form.reset(defaults);
        forget();
      },
      sent: () => {
        form.reset(defaults);
        forget();
      },
    },
  };
}
