import type { BlockRefusal } from "../block/problem";
import { EngineError } from "../engine-error";
import type { Workspace } from "../workspace";
import type { Part, Row } from "./block-parts";

/** Says by name why a block has no number. */
export function refuse(
  { frame }: Workspace,
  { refusal, rows, parts }: { refusal: BlockRefusal; rows: readonly Row[]; parts: readonly Part[] },
): never {
  if (refusal.kind === "too-many-unknowns") {
    const found = `${refusal.dimensions} unknowns that have to be integrated numerically together`;
    const allowed = `at most ${refusal.limit}`;
    const keys = parts.map(({ measurand }) => frame.measurands[measurand]!.key);
    const pointer = pointerOf(frame, parts);
    throw new EngineError([
      { pointer, code: "out-of-range", found: `${found}, of ${keys.join(", ")}`, allowed },
    ]);
  }
  const names = refusal.rows.map((i) => rows[i]!.id ?? frame.measurands[rows[i]!.measurand]!.key);
  const found = `noises of ${[...new Set(names)].join(", ")} that are no covariance`;
  const allowed = "correlations whose matrix is positive definite";
  throw new EngineError([
    { pointer: "/correlations", code: "not-positive-definite", found, allowed },
  ]);
}

/** The hypothesis whose predictions the block is about; the campaign where it is the references. */
function pointerOf({ hypotheses }: Workspace["frame"], parts: readonly Part[]): string {
  for (const { role } of parts) {
    if (role.kind === "predicted") return hypotheses[role.prediction.hypothesis]!.pointer;
  }
  return "/campaign";
}
