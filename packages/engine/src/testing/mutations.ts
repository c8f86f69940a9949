import { readCampaign } from "@weighhouse/campaign/read";
import { problemLine } from "@weighhouse/campaign/problem";
import { standingsSchema } from "@weighhouse/campaign/standings";
import { placesOf, put, type Open } from "@weighhouse/campaign/testing/documents";
import { everyForm, type FormName } from "@weighhouse/campaign/testing/every-form";
import { randomSource, type RandomSource } from "@weighhouse/numerics/random-source";
import { scoreCampaign } from "../score";

const documents = everyForm();
const names = Object.keys(documents) as FormName[];

/** Numbers that arithmetic trips over. */
const sizes = [0, 5e-324, 1e-300, 1e-160, 1e-140, 1e-9, 1, 2460000.00001, 1e9, 1e140, 1e155, 1e300];
const extremes = [...sizes, ...sizes.map((size) => -size), Number.MAX_VALUE, -Number.MAX_VALUE];
const factors = [-1, 0.01, 0.1, 0.5, 0.9, 1.1, 2, 10, 100, 1e6];

export interface Mutant {
  name: FormName;
  document: Open;
  /** What was done, to be read by who looks for the reason. */
  changes: string[];
}

/** One of the documents of every form, one to three of its places changed; the same by seed. */
export function mutant(seed: number, among: readonly FormName[] = names): Mutant {
  const random = randomSource(seed);
  const name = pick(random, among);
  const document = structuredClone(documents[name]);
  const changes: string[] = [];
  const many = 1 + random.below(3);
  for (let i = 0; i < many; i += 1) changes.push(change(document, random));
  return { name, document, changes };
}

function pick<T>(random: RandomSource, list: readonly T[]): T {
  return list[random.below(list.length)]!;
}

/** Mostly what a document may hold elsewhere, so that most are scored and not refused. */
function change(document: Open, random: RandomSource): string {
  const places = placesOf(document);
  const isNumber = (path: (string | number)[]) => typeof valueAt(document, path) === "number";
  const path = pick(random, random.below(3) > 0 ? places.filter(isNumber) : places);
  const there = valueAt(document, path);
  const say = (value: unknown) => `/${path.join("/")}: ${JSON.stringify(value)?.slice(0, 80)}`;
  if (Array.isArray(there) && there.length > 0) {
    const at = random.below(there.length);
    if (random.below(2) === 0) there.splice(at, 1);
    else there.splice(at, 1, ...there.slice(at), structuredClone(there[at]));
    return say(`${there.length} long`);
  }
  const value = changed(there, { random, document, places, path });
  put(document, path, value);
  return say(value);
}

function changed(
  there: unknown,
  {
    random,
    document,
    places,
    path,
  }: {
    random: RandomSource;
    document: Open;
    places: (string | number)[][];
    path: (string | number)[];
  },
): unknown {
  const dice = random.below(10);
  if (typeof there === "number") {
    if (dice < 7) return there * pick(random, factors);
    if (dice < 8) return pick(random, extremes);
  }
  if (dice === 9) return pick(random, [null, 0, 1, "", "odd", true, [], {}]);
  // What stands in another place of that name.
  const alike = places.filter((other) => other.at(-1) === path.at(-1));
  const other = pick(random, alike);
  return structuredClone(valueAt(document, other));
}

function valueAt(document: Open, path: readonly (string | number)[]): Open {
  return path.reduce<Open>((at, step) => at[step], document);
}

/**
 * Scores a document that may be any: what is wrong with how that went, or null.
 * `scored` tells the two right ways out apart.
 */
export function faultOf(document: unknown): { fault: string | null; scored: boolean } {
  try {
    const read = readCampaign(document);
    const result = read.ok ? scoreCampaign(read.value) : read;
    if (!result.ok) {
      for (const problem of result.problems) {
        const line = problemLine(problem);
        if (!/^(\/|$)/.test(problem.pointer) || /undefined|NaN/.test(line)) {
          return { fault: `a problem without its place: ${line}`, scored: false };
        }
      }
      const fault = result.problems.length > 0 ? null : "refused without a reason";
      return { fault, scored: false };
    }
    return { fault: faultIn(result.value), scored: true };
  } catch (error) {
    return {
      fault: error instanceof Error ? (error.stack ?? error.message) : "thrown",
      scored: false,
    };
  }
}

function faultIn(standings: unknown): string | null {
  // The schema refuses NaN and infinite numbers, and JSON would turn them into null.
  const parsed = standingsSchema.safeParse(standings);
  if (!parsed.success) return JSON.stringify(parsed.error.issues.slice(0, 3));
  for (const { posterior, key } of parsed.data.hypotheses) {
    if (!(posterior >= 0 && posterior <= 1 + 1e-9)) return `${key} has the posterior ${posterior}`;
  }
  for (const { conformance, sd, measurand } of parsed.data.verdicts) {
    if (conformance !== null && !(conformance >= 0 && conformance <= 1 + 1e-9)) {
      return `${measurand} has the conformance ${conformance}`;
    }
    if (sd !== null && !(sd > 0)) return `${measurand} has the sd ${sd}`;
  }
  return null;
}
