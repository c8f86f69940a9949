import { createWorkspace, enterDerived } from "./create-workspace";
import { derivedVector } from "./derived/vector";
import type { EngineState } from "./engine-state";
import type { Workspace } from "./workspace";

/** A workspace ready to score from: derived values that can be computed are in it. */
export function openWorkspace({ frame, sums }: Pick<EngineState, "frame" | "sums">): Workspace {
  const workspace = createWorkspace(frame, sums);
  if (frame.measurands.some(({ derived }) => derived !== null)) {
    enterDerived(workspace, derivedVector(workspace));
  }
  return workspace;
}
