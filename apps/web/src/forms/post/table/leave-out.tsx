"use client";

import { formatCount } from "@weighhouse/figures/numbers";
import { Tick } from "../../form-frame";
import type { PreviewedTable } from "./protocol";

/** Rows at fault can be left out, but only where somebody says so. */
export function LeaveOut(props: {
  previewed: PreviewedTable;
  checked: boolean;
  onChange: (leaveOut: boolean) => void;
}) {
  const { counts } = props.previewed;
  const faults = counts.refused + counts.conflict;
  if (faults === 0 || counts.new === 0) return null;
  return (
    <div className="mt-4">
      <Tick
        label={`Leave out the ${formatCount(faults)} ${faults === 1 ? "row" : "rows"} at fault`}
        help={`Of ${formatCount(faults + counts.new + counts.alreadyThere)} rows the others are entered: all of them or none.`}
        checked={props.checked}
        onChange={(event) => props.onChange(event.target.checked)}
      />
    </div>
  );
}
