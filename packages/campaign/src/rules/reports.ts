import { below } from "../pointer";
import type { Reading } from "./reading";

/** What the reports of one event have ruled out so far, each by which measurement. */
type Ruled = { yes: string | null; no: string | null };

/**
 * Reports of an event that leave no truth possible are refused, naming them. A report rules out a
 * truth under which it has the probability zero:
 *
 *   reported yes: "yes" when efficiency = 0, "no" when falseAlarm = 0
 *   reported no:  "yes" when efficiency = 1, "no" when falseAlarm = 1
 */
export function checkReports(reading: Reading): void {
  const events = new Map<string, Ruled>();
  if (![...reading.observables.values()].some(({ scale }) => scale === "event")) return;
  for (const [index, measurement] of (reading.form.measurements ?? []).entries()) {
    if (typeof measurement?.occurred !== "boolean") continue;
    const { occurred, efficiency, falseAlarm, measurand, id, setAside } = measurement;
    if (measurand === undefined || setAside !== null) continue;
    const target = reading.measurands.get(measurand);
    if (target === undefined || target.closed !== null) continue;
    const ruled = events.get(measurand) ?? { yes: null, no: null };
    events.set(measurand, ruled);
    const told = ruled.yes !== null && ruled.no !== null;
    if (efficiency === (occurred ? 0 : 1)) ruled.yes ??= id ?? "";
    if (falseAlarm === (occurred ? 0 : 1)) ruled.no ??= id ?? "";
    if (told || ruled.yes === null || ruled.no === null) continue;
    const found =
      ruled.yes === ruled.no
        ? `${id}, which neither truth of ${measurand} can give`
        : `${ruled.yes} and ${ruled.no}, which no truth of ${measurand} can give together`;
    const allowed = "efficiencies below 1 or false alarms above 0 that leave one truth possible";
    reading.refuse(below("/measurements", index), "impossible-reports", found, allowed);
  }
}
