"use client";

import type { TableChoices } from "@weighhouse/tables/table-match";
import { useCallback, useEffect, useRef } from "react";
import { choicesOf, defaultsOf, tableSchema, type TableDraft } from "./table-draft";
import type { useTable } from "./use-table";

const waitMs = 150;

/**
 * Matches a table anew whenever what is chosen for it has changed, a moment after the last change.
 *
 * @returns what ends that moment, so that what comes next is about what stands in the form
 */
export function useMatching(options: {
  table: Pick<ReturnType<typeof useTable>, "opened" | "remembered" | "match">;
  columns: TableChoices;
  values: TableDraft;
}): () => Promise<void> {
  const { table, columns, values } = options;
  const { opened, remembered, match } = table;
  // As text, so that typing rows or drawing again does not match again.
  const whole = JSON.stringify({ ...values, text: "" });
  const due = useRef<(() => Promise<void>) | null>(null);

  useEffect(() => {
    if (opened === null) return;
    const run = async () => {
      if (due.current !== run) return;
      due.current = null;
      const read = await tableSchema.safeParseAsync(JSON.parse(whole) as TableDraft);
      if (!read.success) return;
      const { data } = read;
      await match({ choices: choicesOf(columns, data), remembered, defaults: defaultsOf(data) });
    };
    due.current = run;
    const timer = setTimeout(() => void run(), waitMs);
    return () => {
      clearTimeout(timer);
      if (due.current === run) due.current = null;
    };
  }, [opened, columns, whole, remembered, match]);

  return useCallback(async () => due.current?.(), []);
}
