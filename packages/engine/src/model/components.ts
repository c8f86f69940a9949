import type { Workspace } from "../workspace";
import type { Component, Components, Part, Row } from "./block-parts";
import { rowsOf } from "./rows";
import { sharedUnknowns } from "./shared-unknowns";
import { Union } from "./union";

/**
 * Parts the rows of some measurands into components that share no unknown: their evidences
 * multiply. Rows that share nothing at all are put together in one, the first.
 *
 * @param parts whose counts and events aren't looked at, but for counts whose rate hangs on unknowns
 * @param keep which rows are taken
 */
export function componentsOf(
  workspace: Workspace,
  parts: readonly Part[],
  keep: (row: Row) => boolean = () => true,
): Components {
  const union = new Union();
  const nodes = new Map<string, number>();
  const nodeOf = (key: string) => {
    const there = nodes.get(key);
    if (there !== undefined) return there;
    const made = union.add();
    nodes.set(key, made);
    return made;
  };
  // Everything without an unknown is one component: its rows are independent anyway.
  const alone = union.add();
  const result: Components = { components: [], ln: 0, squares: 0, counted: 0 };
  const placed: { part: Part; node: number; row: Row | null }[] = [];
  for (const part of parts) {
    const hubs = sharedUnknowns(workspace.frame, part.measurand, part.role).map(nodeOf);
    for (const hub of hubs) union.join(hubs[0]!, hub);
    const { rows, ln, squares, counted } = rowsOf(workspace, part.measurand, part.role);
    result.ln += ln;
    result.squares += squares;
    result.counted += counted;
    let any = false;
    for (const row of rows) {
      if (!keep(row)) continue;
      any = true;
      const keys = rowKeys(workspace, row);
      const apart = keys.length > 0 || hasItsOwn(workspace, part, row);
      const node = hubs[0] ?? (apart ? union.add() : alone);
      for (const key of keys) union.join(node, nodeOf(key));
      placed.push({ part, node, row });
    }
    const counts = workspace.frame.measurands[part.measurand]!.scale === "count";
    if (counts && !any && hubs.length > 0) placed.push({ part, node: hubs[0]!, row: null });
  }
  const byRoot = new Map<number, Component>();
  for (const { part, node, row } of placed) {
    const root = union.rootOf(node);
    let component = byRoot.get(root);
    if (component === undefined) {
      component = { parts: [], rows: [] };
      byRoot.set(root, component);
      result.components.push(component);
    }
    if (component.parts.at(-1) !== part) component.parts.push(part);
    if (row !== null) component.rows.push(row);
  }
  return result;
}

/** Whether an interval of the row's own is integrated numerically: then it is better by itself. */
function hasItsOwn({ frame }: Workspace, { measurand, role }: Part, { told }: Row): boolean {
  if (role.kind !== "predicted" || !("width" in role.prediction.tolerance)) return false;
  return frame.measurands[measurand]!.period > 0 || (told !== null && !("variance" in told));
}

/** What a row shares beside its measurand's unknowns. */
function rowKeys({ correlationGroups, derived }: Workspace, row: Row): string[] {
  const keys = row.draws.map((draw) => `draw ${draw}`);
  const group = row.id === null ? undefined : correlationGroups.get(row.id);
  if (group !== undefined) keys.push(`group ${group}`);
  // Derived values are one vector: their noises hang together.
  if (derived.measurands.includes(row.measurand)) keys.push("derived");
  return keys;
}
