import { assign, has, open } from "./assignment";
import type { Assignment, Table } from "./assignment";
import { isFitsTime, isTimeName } from "./field-names";
import type { RawColumn } from "./raw-table";
import { readTimeWords } from "./time-words";
import { ucdField } from "./ucd-fields";

/** One column, or a date and a time of day, is the time of observation; others are kept as extra. */
export function assignTimes(at: Assignment): void {
  const { table } = at;
  if (has(at, "observedAt", "date", "timeOfDay")) return;
  const candidates = open(at).filter(
    ([column]) =>
      isTimeName(column.name) ||
      readTimeWords(column.name) !== null ||
      column.kind === "time" ||
      (ucdField(column.ucd)?.kind === "field" &&
        column.ucd?.toLowerCase().startsWith("time.epoch")),
  );
  const date = candidates.find(([, index]) => holds(table, index, /^\d{4}-\d{2}-\d{2}$/));
  const clock = candidates.find(([, index]) =>
    holds(table, index, /^\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?\s*(?:Z|UTC)?$/i),
  );
  if (date !== undefined && clock !== undefined) {
    assign(at, date[1], "date", "synonym");
    assign(at, clock[1], "timeOfDay", "synonym");
    return;
  }
  const [best] = candidates.toSorted(([a], [b]) => remoteness(a) - remoteness(b));
  if (best === undefined) return;
  const [{ name, kind }, index] = best;
  const byName = isTimeName(name) || isFitsTime(name) || readTimeWords(name) !== null;
  assign(at, index, "observedAt", byName ? "synonym" : kind === "time" ? "unit" : "ucd");
}

/** Whether each cell is of a form, and one at least is there. */
export function holds({ rows }: Table, index: number, form: RegExp): boolean {
  const there = rows
    .map(({ cells }) => cells[index] ?? null)
    .filter((cell) => cell !== null && cell !== "");
  return there.length > 0 && there.every((cell) => form.test(String(cell)));
}

/** Times at the observer go before others, and among them UTC. */
function remoteness({ name, timeReference, timeScale }: RawColumn): number {
  const words = readTimeWords(name);
  const reference = timeReference ?? words?.reference ?? "topocenter";
  const scale = timeScale ?? words?.scale ?? "utc";
  return (
    (reference === "topocenter" || reference === "geocenter" ? 0 : 2) + (scale === "utc" ? 0 : 1)
  );
}
