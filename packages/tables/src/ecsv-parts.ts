import { decimalSum } from "./number-text";
import type { RawCell, RawColumn } from "./raw-table";
import type { TableProblem } from "./table";

/** A column of the table as it is given on, and how its cell comes from a record's. */
export type EcsvSource = {
  column: RawColumn;
  cell: (cells: readonly RawCell[]) => RawCell;
  /** Names of the file's columns that it is made of. */
  parts: readonly string[];
};

type Node = ReadonlyMap<unknown, unknown>;
type Sources = ReadonlyMap<string, EcsvSource>;

/** Scales of time, and formats of astropy's that are ISO 8601. */
const ISO = new Set(["iso", "isot", "fits", "datetime64"]);
const MAX_DEPTH = 20;

/**
 * Puts together what astropy wrote as several columns: times with their scale and format (as one
 * value or as `jd1` and `jd2`), quantities with their unit, data with a mask. What else it has a class
 * for (coordinates, say) is left as the columns that it was written as, said so.
 */
export function joinParts(
  columns: readonly RawColumn[],
  serialized: ReadonlyMap<string, unknown>,
): { sources: EcsvSource[]; notes: string[]; problems: TableProblem[] } {
  const own: Sources = new Map(
    columns.map((column, index) => [
      column.name,
      { column, cell: (cells) => cells[index] ?? null, parts: [column.name] },
    ]),
  );
  const reading = new Reading(own);
  const joined = new Map<string, EcsvSource>();
  const gone = new Set<string>();
  for (const [name, node] of serialized) {
    for (const source of reading.sources(name, node, 0)) {
      const [first = name] = source.parts;
      joined.set(first, source);
      for (const part of source.parts.slice(1)) gone.add(part);
    }
  }
  for (const name of reading.dropped) gone.add(name);
  const sources = [...own].flatMap(([name, source]) =>
    joined.has(name) ? [joined.get(name) as EcsvSource] : gone.has(name) ? [] : [source],
  );
  return { sources, notes: reading.notes, problems: [...reading.problems, ...twice(sources)] };
}

class Reading {
  readonly notes: string[] = [];
  readonly problems: TableProblem[] = [];
  readonly dropped = new Set<string>();
  readonly #own: Sources;

  constructor(own: Sources) {
    this.#own = own;
  }

  /** One for what is understood, several for the parts of what isn't. */
  sources(name: string, node: unknown, depth: number): EcsvSource[] {
    if (!(node instanceof Map) || depth > MAX_DEPTH) return [];
    const known = this.problems.length;
    const source = this.#source(node, depth);
    if (this.problems.length > known) return [];
    if (source !== null) {
      return [
        {
          ...source,
          column: { ...source.column, name: source.parts.length > 1 ? name : source.column.name },
        },
      ];
    }
    const className = textOf(node, "__class__");
    if (className !== null) {
      this.notes.push(`${name} is of the class ${className}: its parts are columns of their own`);
    }
    return [...(node as Node)].flatMap(([part, child]) =>
      child instanceof Map && (child.has("__class__") || child.has("name"))
        ? this.sources(`${name}.${String(part)}`, child, depth + 1)
        : [],
    );
  }

  #source(node: Node, depth: number): EcsvSource | null {
    const className = textOf(node, "__class__");
    if (className === null) return this.#named(node);
    const kind = className.split(".").at(-1) ?? "";
    if (kind === "Time" || kind === "TimeDelta") return this.#time(node, kind, depth);
    if (/^Masked(?:Column|NDArray)$/.test(kind)) return this.#masked(node, depth);
    if (/^(?:Masked)?(?:Quantity|Angle|Latitude|Longitude|Distance)$|^Column$/.test(kind)) {
      const value = this.#part(node, kind === "Column" ? "data" : "value", depth);
      const unit = node.get("unit");
      const named = unit instanceof Map ? textOf(unit, "unit") : null;
      return value && withColumn(value, { unit: value.column.unit ?? named });
    }
    return null;
  }

  #named(node: Node): EcsvSource | null {
    const name = textOf(node, "name");
    if (name === null) return null;
    const source = this.#own.get(name);
    if (source !== undefined) return source;
    const found = `a part called ${name} in the header's __serialized_columns__`;
    this.problems.push({ line: null, column: name, found, allowed: "the name of a column" });
    return null;
  }

  #part(node: Node, name: string, depth: number): EcsvSource | null {
    const part = node.get(name);
    return part instanceof Map && depth <= MAX_DEPTH ? this.#source(part, depth + 1) : null;
  }

  #masked(node: Node, depth: number): EcsvSource | null {
    const data = this.#part(node, "data", depth);
    const mask = this.#part(node, "mask", depth);
    if (data === null || mask === null) return data;
    return {
      column: data.column,
      cell: (cells) => (mask.cell(cells) === false ? data.cell(cells) : null),
      parts: [...data.parts, ...mask.parts],
    };
  }

  #time(node: Node, kind: "Time" | "TimeDelta", depth: number): EcsvSource | null {
    const value = this.#part(node, "value", depth);
    const whole = value ?? this.#twoPartDate(node, depth);
    if (whole === null) return null;
    this.#drop(node, "_delta_tdb_tt");
    this.#drop(node, "_delta_ut1_utc");
    const format = value === null ? "jd" : (textOf(node, "format")?.toLowerCase() ?? null);
    if (kind === "TimeDelta") {
      const unit = format === "jd" ? "d" : format === "sec" ? "s" : null;
      return withColumn(whole, { unit: whole.column.unit ?? unit });
    }
    return withColumn(whole, {
      kind: "time",
      timeScale: textOf(node, "scale")?.toLowerCase() ?? null,
      timeFormat: format !== null && ISO.has(format) ? "iso" : format,
    });
  }

  #twoPartDate(node: Node, depth: number): EcsvSource | null {
    const days = this.#part(node, "jd1", depth);
    const rest = this.#part(node, "jd2", depth);
    if (days === null || rest === null) return null;
    return {
      column: days.column,
      cell: (cells) => {
        const [a, b] = [days.cell(cells), rest.cell(cells)];
        if (typeof a === "number" && typeof b === "number") return decimalSum(a, b);
        return a === null || b === null ? null : `${a} + ${b}`;
      },
      parts: [...days.parts, ...rest.parts],
    };
  }

  /** What astropy keeps beside a time so as not to compute it again. */
  #drop(node: Node, part: string): void {
    const child = node.get(part);
    const name = child instanceof Map ? textOf(child, "name") : null;
    if (name === null || !this.#own.has(name)) return;
    this.dropped.add(name);
    this.notes.push(`column ${name} is astropy's own beside a time, and left out`);
  }
}

function withColumn(source: EcsvSource, changes: Partial<RawColumn>): EcsvSource {
  return { ...source, column: { ...source.column, ...changes } };
}

function textOf(node: Node, name: string): string | null {
  const value = node.get(name);
  return typeof value === "string" && value !== "" ? value : null;
}

function twice(sources: readonly EcsvSource[]): TableProblem[] {
  const names = new Set<string>();
  return sources.flatMap(({ column: { name } }) => {
    const known = names.has(name);
    names.add(name);
    const found = "a second column of this name, made of several";
    return known ? [{ line: null, column: name, found, allowed: "one column of each name" }] : [];
  });
}
