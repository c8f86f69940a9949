import type { Prediction } from "@weighhouse/campaign/document";
import type { Expected } from "./expectation";
import type { MeasurandFrame, ToleranceFrame } from "./frame";
import { uniformRole } from "./reference-role";

/** A tolerance in scoring space; none beside an `expected` is exact. */
export function toleranceFrame(
  prediction: Prediction,
  frame: MeasurandFrame,
  { natural }: Pick<Expected, "natural">,
): ToleranceFrame {
  const { tolerance, probability } = prediction;
  if (probability !== null) return { family: "event", probability };
  if (tolerance === null) return { family: "exact" };
  switch (tolerance.family) {
    case "normal": {
      const width = normalWidth(tolerance, frame, natural);
      const { sharing } = tolerance;
      if (sharing !== "smooth") return { family: "normal", ...width, sharing };
      return {
        family: "normal",
        ...width,
        sharing,
        condition: frame.conditions.indexOf(tolerance.in!),
        length: tolerance.length!,
      };
    }
    case "interval": {
      const { lower, upper, width } = uniformRole(tolerance, frame, 0);
      return { family: "interval", lower, upper, width, sharing: tolerance.sharing };
    }
    case "atMost":
    case "atLeast":
      return oneSided(tolerance, frame);
    case "splitNormal":
      return { family: "splitNormal", plus: tolerance.plus, minus: tolerance.minus };
    case "gamma":
      return { family: "gamma", mean: tolerance.mean, sd: tolerance.sd };
  }
}

/** A relative one is sd / ln 10 dex on log10, else a fraction of |expected|. */
function normalWidth(
  { sd, relative }: { sd: number; relative: boolean },
  { scale }: MeasurandFrame,
  natural: number | null,
): { sd: number; relative: boolean } {
  if (!relative) return { sd, relative: false };
  if (scale === "log10") return { sd: sd / Math.LN10, relative: false };
  if (natural === null) return { sd, relative: true };
  return { sd: sd * Math.abs(natural), relative: false };
}

/** Uniform from the bound to the far end of the reference, which is uniform. */
function oneSided(
  tolerance: Extract<NonNullable<Prediction["tolerance"]>, { family: "atMost" | "atLeast" }>,
  frame: MeasurandFrame,
): ToleranceFrame {
  const { family, bound, sharing } = tolerance;
  const reference = frame.roles[0]!;
  if (reference.kind !== "uniform") throw new TypeError("one-sided without a uniform reference");
  const natural = frame.natural!;
  const ends =
    family === "atMost"
      ? { lower: natural.lower, upper: bound }
      : { lower: bound, upper: natural.upper };
  const { lower, upper, width } = uniformRole(ends, frame, 0);
  return { family, lower, upper, width, sharing };
}
