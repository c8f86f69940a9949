import { splitNormalUnknown } from "../block/outer-unknowns";
import type { DesignColumn } from "../frame";
import { loadDraws } from "./draws";
import { addOuterParameters } from "./expected-values";
import { flatLevel } from "./levels";
import { fixedValue, type Section } from "./section";

/**
 * The rows of a triangular factor. An unknown that is integrated numerically in this block, because
 * of other rows, moves what is expected of them instead of being a column.
 */
export function addFactoredSection(section: Section, shared: ReadonlySet<number>): void {
  const { assembly, part, frame, begin, rows } = section;
  const design = frame.designs[frame.roles.indexOf(part.role)]!;
  if (rows.some(({ factored }) => factored!.impossible)) assembly.impossible = true;
  const values = design.columns.map((column) => columnValue(section, column));
  const moving = values.flatMap((value, c) => (value === null ? [] : [{ value, c }]));
  if (moving.length > 0) {
    assembly.expect((base) => {
      for (const { value, c } of moving) {
        const away = value();
        if (!Number.isFinite(away)) return false;
        rows.forEach(({ factored }, i) => {
          base[begin + i]! += factored!.coefficients[c]! * away;
        });
      }
      return true;
    });
  }
  loadDraws(section, fixedValue(rows.length, Number.NaN), shared);
}

/** How far the unknown is from the column's origin, where it is an outer one; else it is loaded. */
function columnValue(section: Section, column: DesignColumn): (() => number) | null {
  const { assembly, centre, begin, rows, part } = section;
  const c = section.frame.designs[section.frame.roles.indexOf(part.role)]!.columns.indexOf(column);
  const load = (place: number, step: number, origin = 0) =>
    rows.forEach(({ factored }, i) => {
      const coefficient = factored!.coefficients[c]!;
      if (coefficient === 0) return;
      assembly.load(place, begin + i, coefficient * step);
      assembly.base[begin + i]! += coefficient * origin;
    });
  const { key } = column;
  const there = assembly.placeOf(key);
  const outer = there !== undefined && !assembly.isLinear(key) ? there : null;
  switch (column.kind) {
    case "normal":
      if (outer !== null) return () => assembly.values[outer]! - column.origin;
      load(assembly.addLinear(key, { kind: "normal" }), column.sd);
      return null;
    case "flat": {
      if (outer !== null) return () => assembly.values[outer]! - centre;
      const { origin, unknown } = flatLevel(column, centre);
      load(assembly.addLinear(key, unknown), 1, origin - centre);
      return null;
    }
    case "split": {
      const { plus, minus } = column;
      const place = assembly.addOuter(key, () =>
        splitNormalUnknown({ plus, minus }, { counted: true }),
      );
      return () => assembly.values[place]!;
    }
    case "parameter": {
      const { slot, unknown, from, step, logged } = column;
      if (section.linear.has(slot)) {
        load(assembly.addLinear(key, unknown), step);
        return null;
      }
      const { role } = part;
      if (role.kind !== "predicted") throw new TypeError("a parameter of no prediction");
      addOuterParameters(assembly, role.prediction, section.linear);
      const scope = assembly.scopeOf(role.prediction.hypothesis);
      return logged ? () => Math.log10(scope[slot]! / from) : () => scope[slot]! - from;
    }
  }
}
