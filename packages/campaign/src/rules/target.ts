import type { Condition, Measurand, Observable } from "../document";
import type { Legible } from "../form";

/** What measurements of one measurand are held against: found once, used for each of them. */
export type Target = {
  key: string;
  measurand: Legible<Measurand>;
  observable: Legible<Observable> | undefined;
  conditions: ReadonlySet<string>;
  fromTime: Legible<Condition>[];
  where: [string, number | null, number | null][];
  /** Conditions that a prediction or the reference of a curve uses, each with what uses it. */
  needed: ReadonlyMap<string, string>;
  /** Lists of shared errors found right: measurements read from a text have equal ones in common. */
  loadings: Map<readonly unknown[], "right" | "right in a batch">;
};
