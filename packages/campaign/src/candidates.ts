import * as z from "zod";
import type { CampaignDocument, Measurand, Measurement, Observable } from "./document";
import {
  defaulted,
  key,
  list,
  name,
  notNegative,
  number,
  optional,
  positive,
  record,
} from "./fields";
import { readForm } from "./form";
import { parseJson } from "./json-text";
import { loadingSchema } from "./measurement";
import { below } from "./pointer";
import type { Problem, ProblemCode, Result } from "./problem";
import { conditionsUsed } from "./rules/expressions";

/** Measurements that could be made, to be ranked by what they would tell. */
export const CANDIDATES_FORMAT = "weighhouse-candidates/1";

const candidateSchema = z.strictObject({
  key,
  measurand: key,
  conditions: record(name, number),
  sd: optional(positive).describe("the standard uncertainty that it would reach, in scoring space"),
  shared: list(loadingSchema),
  cost: optional(positive),
  chance: defaulted(z.number().gt(0).max(1), 1),
  efficiency: defaulted(z.number().min(0).max(1), 1),
  falseAlarm: defaulted(z.number().min(0).max(1), 0),
  exposure: defaulted(positive, 1),
  background: defaulted(notNegative, 0),
});

export const candidatesSchema = z.strictObject({
  format: z.literal(CANDIDATES_FORMAT),
  candidates: z.array(candidateSchema).min(1).max(200),
});

export type Candidate = z.output<typeof candidateSchema>;

/** Reads a candidates document for a campaign: its form, and what must fit the campaign, all at once. */
export function readCandidatesText(text: string, document: CampaignDocument): Result<Candidate[]> {
  const parsed = parseJson(text);
  if (parsed.problems.length > 0) return { ok: false, problems: parsed.problems };
  const read = readForm(candidatesSchema, parsed.value, "");
  if (read.value === undefined || read.problems.length > 0) {
    return { ok: false, problems: read.problems };
  }
  // Without a problem every part was legible.
  const { candidates } = read.value as z.output<typeof candidatesSchema>;
  const problems: Problem[] = [];
  const seen = new Set<string>();
  candidates.forEach((candidate, i) => {
    const at = below("/candidates", i);
    if (seen.has(candidate.key)) {
      const allowed = "a key of its own for each candidate";
      problems.push(problem(below(at, "key"), "duplicate", `"${candidate.key}" again`, allowed));
    }
    seen.add(candidate.key);
    problems.push(...misfits(candidate, document, at));
  });
  return problems.length > 0 ? { ok: false, problems } : { ok: true, value: candidates };
}

function misfits(candidate: Candidate, document: CampaignDocument, at: string): Problem[] {
  const measurand = document.measurands.find((one) => one.key === candidate.measurand);
  if (measurand === undefined) {
    const found = `"${candidate.measurand}"`;
    const allowed = "a measurand of the campaign that isn't derived";
    return [problem(below(at, "measurand"), "unknown-key", found, allowed)];
  }
  const observable = document.observables.find((one) => one.key === measurand.observable)!;
  const problems = [...conditionMisfits(candidate, { measurand, observable, document }, at)];
  if (measurand.closed !== null) {
    const found = `"${measurand.key}", which is closed`;
    problems.push(problem(below(at, "measurand"), "not-applicable", found, "an open measurand"));
  }
  const measured = observable.scale !== "event" && observable.scale !== "count";
  if (measured && candidate.sd === null) {
    const allowed = "the standard uncertainty that it would reach, above 0";
    problems.push(problem(below(at, "sd"), "missing", "nothing", allowed));
  }
  if (!measured && candidate.sd !== null) {
    const found = `sd on the scale ${observable.scale}`;
    const allowed = observable.scale === "event" ? "efficiency and falseAlarm" : "exposure";
    problems.push(problem(below(at, "sd"), "not-applicable", found, allowed));
  }
  if (!measured && candidate.shared.length > 0) {
    const found = `shared errors on the scale ${observable.scale}`;
    problems.push(problem(below(at, "shared"), "not-applicable", found, "none"));
  }
  const errors = new Set(document.sharedErrors.map((one) => one.key));
  candidate.shared.forEach(({ error }, i) => {
    if (errors.has(error)) return;
    const where = below(at, "shared", i, "error");
    problems.push(problem(where, "unknown-key", `"${error}"`, "a shared error of the campaign"));
  });
  return problems;
}

type Place = { measurand: Measurand; observable: Observable; document: CampaignDocument };

function conditionMisfits(
  { conditions }: Candidate,
  { measurand, observable, document }: Place,
  at: string,
): Problem[] {
  const problems: Problem[] = [];
  const known = observable.conditions.map((one) => one.key);
  for (const [condition, value] of Object.entries(conditions)) {
    const where = below(at, "conditions", condition);
    if (!known.includes(condition)) {
      const allowed = known.length === 0 ? "no conditions" : known.join(", ");
      problems.push(problem(where, "unknown-key", `"${condition}"`, allowed));
    }
    const [lower, upper] = measurand.where[condition] ?? [null, null];
    if ((lower !== null && value < lower) || (upper !== null && value > upper)) {
      const allowed = `${lower ?? "any"} to ${upper ?? "any"}, the range of ${measurand.key}`;
      problems.push(problem(where, "outside-condition", String(value), allowed));
    }
  }
  for (const condition of conditionsNeeded(document, measurand, known)) {
    if (condition in conditions) continue;
    const allowed = `a value of ${condition}, which what is said of ${measurand.key} uses`;
    problems.push(problem(below(at, "conditions"), "lacks-condition", `no ${condition}`, allowed));
  }
  return problems;
}

/** What a curve's reference, expectations and smooth tolerances use of its conditions. */
function conditionsNeeded(
  { hypotheses }: CampaignDocument,
  { key, shape, reference }: Measurand,
  known: readonly string[],
): Set<string> {
  const needed = new Set<string>();
  if (shape !== "curve") return needed;
  if (reference?.family === "polynomial") needed.add(reference.in);
  for (const hypothesis of hypotheses) {
    for (const { measurand, expected, tolerance } of hypothesis.predictions) {
      if (measurand !== key) continue;
      if (typeof expected === "string") {
        for (const one of conditionsUsed(hypothesis, expected, new Set(known))) needed.add(one);
      }
      if (tolerance?.family === "normal" && tolerance.in !== null) needed.add(tolerance.in);
    }
  }
  return needed;
}

function problem(pointer: string, code: ProblemCode, found: string, allowed: string): Problem {
  return { pointer, code, found, allowed };
}

/** What a candidate is read off as: a value, an event's outcome or a count. */
export type Outcome =
  | { value: number; scale: "linear" | "log10" | "magnitude" | "cyclic" }
  | { occurred: boolean }
  | { count: number };

/**
 * The measurement that a candidate would become with an outcome.
 *
 * @param outcome its value is in the observable's unit; `sd` of the candidate is in scoring space,
 *   which on log10 are dex
 */
export function candidateMeasurement(candidate: Candidate, outcome: Outcome): Measurement {
  const dex = "scale" in outcome && outcome.scale === "log10";
  return {
    id: `candidate:${candidate.key}`,
    measurand: candidate.measurand,
    facility: null,
    team: null,
    // A draw of its own where an error is drawn per batch.
    batch: `candidate ${candidate.key}`,
    observedAt: null,
    postedAt: null,
    knownSince: null,
    conditions: candidate.conditions,
    value: "value" in outcome ? outcome.value : null,
    sd: "value" in outcome && !dex ? candidate.sd : null,
    sdDex: dex ? candidate.sd : null,
    plus: null,
    minus: null,
    limit: null,
    confidence: null,
    sigmas: null,
    noise: null,
    occurred: "occurred" in outcome ? outcome.occurred : null,
    efficiency: "occurred" in outcome ? candidate.efficiency : null,
    falseAlarm: "occurred" in outcome ? candidate.falseAlarm : null,
    count: "count" in outcome ? outcome.count : null,
    exposure: "count" in outcome ? candidate.exposure : null,
    background: "count" in outcome ? candidate.background : null,
    unit: null,
    status: "final",
    source: null,
    extra: {},
    shared: candidate.shared,
    sameData: null,
    setAside: null,
  };
}
