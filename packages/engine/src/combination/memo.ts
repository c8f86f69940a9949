import type { Workspace } from "../workspace";

/** Remembers what a function of a workspace and a measurand gave: a workspace never changes. */
export function perMeasurand<T>(
  compute: (workspace: Workspace, measurand: number) => T,
): (workspace: Workspace, measurand: number) => T {
  const known = new WeakMap<Workspace, Map<number, T>>();
  return (workspace, measurand) => {
    let own = known.get(workspace);
    if (own === undefined) known.set(workspace, (own = new Map()));
    if (own.has(measurand)) return own.get(measurand) as T;
    const made = compute(workspace, measurand);
    own.set(measurand, made);
    return made;
  };
}
