"use client";

import type { TableChoices } from "@weighhouse/tables/table-match";
import { useCallback, useEffect, useRef, useState } from "react";
import { noChoices } from "./choices";
import { dropTable, keepTable, keptTable, type KeptTable } from "./kept-table";

/**
 * Keeps the table that was brought in and what was chosen for its columns in this browser until it
 * is posted: an error, a reload or an ended session loses nothing.
 */
export function useKeptTable(options: {
  campaign: string;
  choices: TableChoices;
  open: (file: Blob, name: string) => Promise<void>;
  setColumns: (choices: TableChoices) => void;
}) {
  const { campaign, choices, open, setColumns } = options;
  const [restoredFrom, setRestoredFrom] = useState<string | null>(null);
  const [notKept, setNotKept] = useState(false);
  const table = useRef<{ file: Blob; name: string } | null>(null);

  useEffect(() => {
    let current = true;
    const restore = async () => {
      const kept = await keptTable(campaign);
      if (!current || kept === null || table.current !== null) return;
      table.current = kept;
      setColumns(kept.choices);
      setRestoredFrom(kept.savedAt);
      await open(kept.file, kept.name);
    };
    void restore();
    return () => {
      current = false;
    };
  }, [campaign, open, setColumns]);

  useEffect(() => {
    if (table.current === null) return;
    const { file, name } = table.current;
    void keep(campaign, { file, name, choices }, setNotKept);
  }, [campaign, choices]);

  const bring = useCallback(
    (file: Blob, name: string) => {
      table.current = { file, name };
      setRestoredFrom(null);
      setColumns(noChoices);
      void keep(campaign, { file, name, choices: noChoices }, setNotKept);
      void open(file, name);
    },
    [campaign, open, setColumns],
  );
  const drop = () => {
    table.current = null;
    setRestoredFrom(null);
    void dropTable(campaign);
  };
  return { bring, kept: { restoredFrom, notKept, drop } };
}

async function keep(
  campaign: string,
  table: Omit<KeptTable, "savedAt">,
  setNotKept: (notKept: boolean) => void,
): Promise<void> {
  setNotKept(!(await keepTable(campaign, { ...table, savedAt: new Date().toISOString() })));
}
