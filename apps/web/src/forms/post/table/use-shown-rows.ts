"use client";

import { useCallback, useRef, useState, type RefObject } from "react";
import type { Show, ShownRow } from "./protocol";
import { CallFailed, type TableWorker } from "./table-worker";

const blockSize = 100;

/** Rows of the worker's table, asked for in blocks as they come into view; those that are there. */
export function useShownRows(worker: RefObject<TableWorker | null>, show: Show) {
  const asked = useRef(new Set<number>());
  const [blocks, setBlocks] = useState<ReadonlyMap<number, ShownRow[]>>(new Map());

  const ask = useCallback(
    (first: number, last: number) => {
      const fetch = async (block: number) => {
        asked.current.add(block);
        try {
          const from = block * blockSize;
          const rows = await worker.current?.call("rows", { show, from, count: blockSize });
          if (rows !== undefined) setBlocks((before) => new Map(before).set(block, rows));
        } catch (error) {
          if (!(error instanceof CallFailed)) throw error;
          asked.current.delete(block);
        }
      };
      const end = Math.floor(last / blockSize);
      for (let block = Math.floor(first / blockSize); block <= end; block += 1) {
        if (!asked.current.has(block)) void fetch(block);
      }
    },
    [worker, show],
  );

  const row = (index: number): ShownRow | null =>
    blocks.get(Math.floor(index / blockSize))?.[index % blockSize] ?? null;

  return { row, ask };
}
