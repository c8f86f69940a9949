"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { useWindowVirtualizer } from "@tanstack/react-virtual";
import { useEffect, useRef, useState, type RefObject } from "react";
import { FateCells } from "./fate-cells";
import type { Show } from "./protocol";
import type { TableWorker } from "./table-worker";
import { useShownRows } from "./use-shown-rows";

const stackedBelow = 900;

/**
 * A table of which only the rows in the window are drawn; it says how many there are, and each row
 * which of them it is. Above and below stand rows as high as those that are left out.
 */
export function RowWindow(props: {
  document: CampaignDocument;
  show: Show;
  count: number;
  worker: RefObject<TableWorker | null>;
  /** The row to go to. */
  target: number | null;
}) {
  const { document, show, count, worker, target } = props;
  const { row, ask } = useShownRows(worker, show);
  const table = useRef<HTMLTableElement>(null);
  const [margin, setMargin] = useState(0);

  useEffect(() => {
    // The page above grows and shrinks: a preview comes and goes.
    const place = () => {
      const top = (table.current?.getBoundingClientRect().top ?? 0) + window.scrollY;
      setMargin((before) => (Math.abs(top - before) > 1 ? top : before));
    };
    place();
    const observer = new ResizeObserver(place);
    observer.observe(window.document.body);
    return () => observer.disconnect();
  }, []);

  // oxlint-disable-next-line react/incompatible-library -- nothing here is memoized by a compiler
  const virtualizer = useWindowVirtualizer({
    count,
    estimateSize: () => (window.innerWidth <= stackedBelow ? 150 : 36),
    overscan: 12,
    scrollMargin: margin,
  });
  const items = virtualizer.getVirtualItems();
  const first = items[0];
  const last = items.at(-1);
  const [from, to] = [first?.index ?? 0, last?.index ?? 0];
  useEffect(() => ask(from, to), [ask, from, to]);

  useEffect(() => {
    if (target !== null) virtualizer.scrollToIndex(target, { align: "center" });
  }, [target, virtualizer]);
  const inWindow = target !== null && target >= from && target <= to;
  useEffect(() => {
    if (!inWindow) return;
    table.current
      ?.querySelector<HTMLElement>(`[data-index="${target}"]`)
      ?.focus({ preventScroll: true });
  }, [inWindow, target]);

  return (
    <table
      ref={table}
      className="table table-fixed text-[14.5px]"
      data-stack="middle"
      aria-rowcount={count + 1}
    >
      <caption className="sr-only">Rows and what becomes of each</caption>
      <thead>
        <tr aria-rowindex={1}>
          <th scope="col" className="w-[8ch]">
            Line
          </th>
          <th scope="col" className="w-[13ch]">
            Fate
          </th>
          <th scope="col">Quantity</th>
          <th scope="col">Observed, facility</th>
          <th scope="col">Result</th>
          <th scope="col" className="w-[34%]">
            Why, and what was done
          </th>
        </tr>
      </thead>
      <tbody>
        <Gap height={first === undefined ? 0 : first.start - margin} />
        {items.map(({ index }) => (
          <tr
            key={index}
            ref={virtualizer.measureElement}
            aria-rowindex={index + 2}
            data-index={index}
            tabIndex={-1}
            className={index === target ? "bg-well" : undefined}
          >
            <FateCells document={document} row={row(index)} />
          </tr>
        ))}
        <Gap height={virtualizer.getTotalSize() - ((last?.end ?? margin) - margin)} />
      </tbody>
    </table>
  );
}

/** As high as the rows that are not drawn. */
function Gap({ height }: { height: number }) {
  if (height <= 0) return null;
  return <tr aria-hidden="true" className="block! border-0! p-0!" style={{ height }} />;
}
