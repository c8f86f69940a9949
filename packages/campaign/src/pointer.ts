/** JSON Pointer (RFC 6901) from a path: `~` becomes `~0`, `/` becomes `~1`. */
export function pointerOf(path: readonly PropertyKey[]): string {
  return path.map((step) => `/${escapeStep(String(step))}`).join("");
}

/** One more step below a pointer. */
export function below(pointer: string, ...steps: (string | number)[]): string {
  return pointer + pointerOf(steps);
}

function escapeStep(step: string): string {
  return step.replaceAll("~", "~0").replaceAll("/", "~1");
}
