import { below } from "@weighhouse/campaign/pointer";

/** How far two numbers may lie apart: |a - b| <= tolerance * max(1, |a|, |b|). 0: the same double. */
export type CompareOptions = {
  tolerance: number;
  /** How much farther apart two numbers may lie, absolutely. */
  within?: (pointer: string) => number;
  passOver?: (pointer: string) => boolean;
};

export type Comparison = {
  /** Numbers compared, the equal ones too. */
  numbers: number;
  /** `pointer: found …, computed …`. */
  differences: string[];
};

/** Compares two JSON values through and through; each difference is named by its JSON Pointer. */
export function compareJson(
  found: unknown,
  computed: unknown,
  options: CompareOptions,
): Comparison {
  const comparison: Comparison = { numbers: 0, differences: [] };
  compareAt("", found, computed, { ...options, comparison });
  return comparison;
}

type Walk = CompareOptions & { comparison: Comparison };

function compareAt(pointer: string, found: unknown, computed: unknown, walk: Walk): void {
  if (walk.passOver?.(pointer) === true) return;
  if (typeof found === "number" && typeof computed === "number") {
    walk.comparison.numbers += 1;
    const apart = Math.abs(found - computed);
    if (!close(found, computed, walk.tolerance) && !(apart <= (walk.within?.(pointer) ?? 0))) {
      note(pointer, found, computed, walk);
    }
    return;
  }
  if (Array.isArray(found) && Array.isArray(computed)) {
    compareLists(pointer, found, computed, walk);
  } else if (isObject(found) && isObject(computed)) {
    compareObjects(pointer, found, computed, walk);
  } else if (found !== computed) {
    note(pointer, found, computed, walk);
  }
}

function compareLists(pointer: string, found: unknown[], computed: unknown[], walk: Walk): void {
  if (found.length !== computed.length) {
    walk.comparison.differences.push(
      `${pointer}: found ${found.length} items, computed ${computed.length}`,
    );
  }
  const shared = Math.min(found.length, computed.length);
  for (let index = 0; index < shared; index += 1) {
    compareAt(below(pointer, index), found[index], computed[index], walk);
  }
}

function compareObjects(
  pointer: string,
  found: Record<string, unknown>,
  computed: Record<string, unknown>,
  walk: Walk,
): void {
  for (const name of new Set([...Object.keys(found), ...Object.keys(computed)])) {
    const at = below(pointer, name);
    if (!Object.hasOwn(found, name)) note(at, undefined, computed[name], walk);
    else if (!Object.hasOwn(computed, name)) note(at, found[name], undefined, walk);
    else compareAt(at, found[name], computed[name], walk);
  }
}

function note(pointer: string, found: unknown, computed: unknown, walk: Walk): void {
  walk.comparison.differences.push(
    `${pointer || "(document)"}: found ${shown(found)}, computed ${shown(computed)}`,
  );
}

function shown(value: unknown): string {
  const text = JSON.stringify(value);
  if (text === undefined) return "nothing";
  return text.length > 60 ? `${text.slice(0, 60)}…` : text;
}

function close(a: number, b: number, tolerance: number): boolean {
  return Math.abs(a - b) <= tolerance * Math.max(1, Math.abs(a), Math.abs(b));
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
