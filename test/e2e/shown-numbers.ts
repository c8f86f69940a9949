import type { Page } from "@playwright/test";

export type ShownNumber = { at: string; text: string; exact: string | null };

/** Every number of the page that says where in the standings document it stands. */
export function shownNumbers(page: Page): Promise<ShownNumber[]> {
  return page.locator("main [data-at]").evaluateAll((elements) =>
    elements.map((element) => ({
      at: element.getAttribute("data-at") ?? "",
      text: (element.textContent ?? "").trim(),
      exact: element.getAttribute("data-exact"),
    })),
  );
}

/** The value at a JSON Pointer (RFC 6901); undefined where there is none. */
export function atPointer(document: unknown, pointer: string): unknown {
  return pointer
    .split("/")
    .slice(1)
    .map((token) => token.replaceAll("~1", "/").replaceAll("~0", "~"))
    .reduce<unknown>(
      (value, token) => (value as Record<string, unknown> | null | undefined)?.[token],
      document,
    );
}

const superscripts = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/**
 * The interval of values that a printed number stands for: half a unit of its last digit to either
 * side. Reads `−4.12`, `7.6 × 10⁻⁵`, `1 − 7.7 × 10⁻⁵`.
 */
export function printedInterval(text: string): [number, number] | null {
  const plain = text
    .replaceAll(/[\u00a0\u202f\u2009 ]/g, "")
    .replaceAll("−", "-")
    .replace(
      /×10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+)/,
      (_, power: string) =>
        `e${[...power].map((digit) => (digit === "⁻" ? "-" : superscripts.indexOf(digit))).join("")}`,
    );
  const lack = /^1-(\d.*)$/.exec(plain);
  if (lack) {
    const interval = printedInterval(lack[1] ?? "");
    return interval && [1 - interval[1], 1 - interval[0]];
  }
  const parts = /^([+-]?)(\d+)(?:\.(\d+))?(?:e(-?\d+))?$/.exec(plain);
  if (!parts) return null;
  const [, , , decimals = "", power = "0"] = parts;
  const value = Number(plain);
  const half = 0.5 * 10 ** (Number(power) - decimals.length);
  return [value - half * 1.0001, value + half * 1.0001];
}

/**
 * Numbers in the standings' own tables that no pointer answers for. The table of steps over time is
 * apart: its rows are of the standings as of other sizes.
 */
export function unaccountedNumbers(page: Page): Promise<string[]> {
  return page.locator("main table:not(details table) td.number").evaluateAll((cells) => {
    const found: string[] = [];
    for (const cell of cells) {
      const walker = document.createTreeWalker(cell, NodeFilter.SHOW_TEXT);
      for (let node = walker.nextNode(); node; node = walker.nextNode()) {
        const inside = node.parentElement?.closest("[data-at]");
        if (!inside && /\d/.test(node.textContent ?? "")) found.push(cell.textContent ?? "");
      }
    }
    return found;
  });
}
