/** A JSON Pointer (RFC 6901) some steps below another; "" is the whole document. */
export function below(pointer: string, ...steps: (string | number)[]): string {
  let longer = pointer;
  for (const step of steps) longer += `/${typeof step === "number" ? step : escaped(step)}`;
  return longer;
}

/** In a step, `~` is written `~0` and `/` is written `~1`. */
function escaped(step: string): string {
  if (!step.includes("~") && !step.includes("/")) return step;
  return step.replaceAll("~", "~0").replaceAll("/", "~1");
}
