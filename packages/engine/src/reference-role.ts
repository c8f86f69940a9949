import type { Observable, Reference } from "@weighhouse/campaign/document";
import { noiseIndex, type MeasurandFrame, type Role, type UniformRole } from "./frame";
import { toScoringSpace, widthInScoringSpace } from "./scoring-space";

/** What silence is charged: role 0. An event's is 1/2, a circle's without one is the whole circle. */
export function referenceRole(
  frame: MeasurandFrame,
  {
    reference,
    observable,
    where,
  }: {
    reference: Reference | null;
    observable: Observable;
    where: Record<string, [number | null, number | null]>;
  },
): Role {
  const { scale } = frame;
  if (scale === "event") return { kind: "event", probability: 0.5 };
  if (reference === null) {
    return { kind: "uniform", lower: 0, upper: frame.period, width: frame.period, noise: 0 };
  }
  if (scale === "count") return rateRole(reference);
  const noise = noiseIndex(frame, reference.scatter ** 2);
  switch (reference.family) {
    case "uniform":
      return uniformRole(reference, frame, noise);
    case "normal":
      return {
        kind: "normal",
        mean: toScoringSpace(reference.mean, scale),
        sd: reference.sd,
        noise,
      };
    case "polynomial": {
      const [lower, upper] = where[reference.in]!;
      return {
        kind: "polynomial",
        condition: observable.conditions.findIndex(({ key }) => key === reference.in),
        lower: lower!,
        upper: upper!,
        degree: reference.degree,
        centre: toScoringSpace(reference.centre, scale),
        sd: reference.sd,
        noise,
      };
    }
    case "gamma":
      throw new TypeError("a gamma reference is refused on every scale but counts");
  }
}

function rateRole(reference: Reference): Role {
  if (reference.family === "gamma") {
    return { kind: "rate", family: "gamma", mean: reference.mean, sd: reference.sd };
  }
  if (reference.family !== "uniform") throw new TypeError("counts have gamma or uniform rates");
  return { kind: "rate", family: "uniform", lower: reference.lower, upper: reference.upper };
}

/** Bounds in the observable's unit; on a circle they may run through the period's end. */
export function uniformRole(
  { lower, upper }: { lower: number; upper: number },
  { scale, period }: MeasurandFrame,
  noise: number,
): UniformRole {
  if (period > 0 && lower > upper) {
    const width = upper - lower + period * Math.ceil((lower - upper) / period);
    return { kind: "uniform", lower, upper: lower + width, width, noise };
  }
  return {
    kind: "uniform",
    lower: toScoringSpace(lower, scale),
    upper: toScoringSpace(upper, scale),
    width: widthInScoringSpace({ lower, upper }, scale),
    noise,
  };
}
