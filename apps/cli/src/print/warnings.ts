import type { Warning } from "@weighhouse/campaign/standings";
import { harmless, wrap, type Terminal } from "../terminal";

/** A line or more per warning: its code, its words, where. */
export function warningLines(warnings: readonly Warning[], terminal: Terminal): string {
  return warnings
    .map(({ code, at, text }) => {
      const place = at === "" ? "" : ` (${harmless(at)})`;
      const line = wrap(`${code}: ${harmless(text)}${place}`, terminal.proseColumns, "  ");
      return `${line.replace(code, terminal.style("yellow", code))}\n`;
    })
    .join("");
}

/** `1 measurement`, `3 measurements`. */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`;
}
