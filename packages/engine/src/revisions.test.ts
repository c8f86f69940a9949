import { describe, expect, test } from "vitest";
import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { readCampaign } from "@weighhouse/campaign/read";
import { everyForm, type FormName } from "@weighhouse/campaign/testing/every-form";
import { randomSource, type RandomSource } from "@weighhouse/numerics/random-source";
import { evidencesOf } from "./evidences";
import {
  addMeasurements,
  createState,
  remakeMeasurands,
  restoreState,
  reviseMeasurements,
  serialiseState,
  standingsOf,
  type EngineState,
  type Revision,
} from "./state";
import { documentFrom } from "./testing/documents";
import { randomCurves } from "./testing/random-curves";
import { expectSame } from "./testing/same-numbers";

const POSTED = "2034-03-02T00:00:00Z";

/** As a ledger would have it: a measurand's first dates stay, whatever becomes of a measurement. */
function read(form: unknown): CampaignDocument {
  const one = readCampaign(form);
  if (!one.ok) throw new Error(JSON.stringify(one.problems));
  const measurands = one.value.measurands.map((measurand) => ({
    ...measurand,
    firstPostedAt: POSTED,
    firstObservedAt: POSTED,
  }));
  const measurements = one.value.measurements.map((measurement) => ({
    ...measurement,
    postedAt: POSTED,
    observedAt: POSTED,
  }));
  return { ...one.value, measurands, measurements };
}

function stateOf(document: CampaignDocument): EngineState {
  const state = createState(document);
  if (!state.ok) throw new Error(JSON.stringify(state.problems));
  return state.value;
}

/** A campaign whose measurements come, change and go, with a state that follows. */
class Course {
  listed: Measurement[] = [];
  remade = 0;
  state: EngineState;

  constructor(
    readonly frame: CampaignDocument,
    readonly keep: "accuracy" | "bytes" = "accuracy",
  ) {
    this.state = stateOf({ ...frame, measurements: [] });
  }

  get document(): CampaignDocument {
    return { ...this.frame, measurements: this.listed };
  }

  post(measurements: readonly Measurement[]): void {
    const added = addMeasurements(this.state, measurements);
    if (!added.ok) throw new Error(JSON.stringify(added.problems));
    this.listed = [...this.listed, ...measurements];
    this.state = restoreState(serialiseState(added.value))!;
  }

  revise(revisions: readonly Revision[]): void {
    const revised = reviseMeasurements(this.state, revisions, this.keep);
    const list: (Measurement | null)[] = [...this.listed];
    for (const { place, after } of revisions) list[place] = after;
    this.listed = list.filter((one) => one !== null);
    if (revised === null) {
      this.state = stateOf(this.document);
      return;
    }
    if (!revised.ok) throw new Error(JSON.stringify(revised.problems));
    const { state, worn } = revised.value;
    this.remade += worn.length;
    if (worn.length > 0) remakeMeasurands(state, worn, this.listed);
    this.state = restoreState(serialiseState(state))!;
  }

  withdraw(...places: number[]): void {
    this.revise(places.map((place) => ({ place, before: this.listed[place]!, after: null })));
  }
}

function scaled(one: Measurement, factor: number): Measurement {
  return {
    ...one,
    value: one.value === null ? null : one.value * factor,
    sd: one.sd === null ? null : one.sd * factor,
    plus: one.plus === null ? null : one.plus * factor,
    status: one.status === "final" ? "provisional" : "final",
  };
}

function revisionOf(course: Course, random: RandomSource, place: number): Revision {
  const before = course.listed[place]!;
  const dice = random.below(4);
  const setAside = before.setAside === null ? { reason: "a lorry passed" } : null;
  // One without an uncertainty can't be counted.
  const countable = before.sd !== null || before.setAside === null;
  if (dice === 0 && countable) return { place, before, after: { ...before, setAside } };
  if (dice === 1) return { place, before, after: scaled(before, 0.98) };
  const correlated = course.frame.correlations.some(({ a, b }) => [a, b].includes(before.id));
  return { place, before, after: correlated ? scaled(before, 1.01) : null };
}

/** Posts all in random order, a few at a time, with revisions of one to three in between. */
function courseOf(
  document: CampaignDocument,
  seed: number,
  keep: "accuracy" | "bytes" = "accuracy",
): Course {
  const random = randomSource(seed);
  const course = new Course(document, keep);
  const rest = [...document.measurements];
  while (rest.length > 0) {
    const batch = Array.from({ length: 1 + random.below(4) }, () =>
      rest.splice(random.below(rest.length), 1),
    );
    course.post(batch.flat());
    const places = course.listed.map((_, place) => place);
    const some = Array.from({ length: random.below(3) }, () =>
      places.splice(random.below(places.length), 1),
    );
    const revisions = some.flat().map((place) => revisionOf(course, random, place));
    if (revisions.length > 0) course.revise(revisions);
  }
  return course;
}

const forms = everyForm();
const slow: readonly string[] = [
  "counts",
  "cyclic",
  "magnitude",
  "limits",
  "logarithmic",
  "priors",
];
const names = (Object.keys(forms) as FormName[]).filter((name) => name !== "whole");

describe.each(names)("a state of %s", (name) => {
  const document = read(forms[name]);
  const seeds = slow.includes(name) || name === "manyParameters" ? [1] : [1, 2, 3];

  test.each(seeds)(
    "after postings, corrections and withdrawals scores as the whole does (%i)",
    (seed) => {
      const course = courseOf(document, seed);
      const whole = stateOf(course.document);
      if (name !== "manyParameters") {
        expectSame(standingsOf(course.state), standingsOf(whole), name === "priors" ? 1e-6 : 1e-9);
        return;
      }
      // Nested sampling draws: another order of the unknowns is another run, within the stated errors.
      const all = standingsOf(whole).hypotheses;
      for (const { hypothesis, lnEvidence } of evidencesOf(course.state)) {
        const there = all.find(({ key }) => key === hypothesis);
        if (there === undefined) continue;
        const error = 5 * Math.max(there.lnEvidenceError, 1e-9);
        expect(Math.abs(lnEvidence! - there.lnEvidence!)).toBeLessThan(error);
      }
    },
  );
});

describe("a state of random curves", () => {
  test.each([1, 2, 3, 4, 5, 6])(
    "scores as the whole does, whatever comes and goes (%i)",
    (seed) => {
      const document = read(randomCurves(seed, { level: 30 }));
      const course = courseOf(document, seed);
      expectSame(standingsOf(course.state), standingsOf(stateOf(course.document)));
    },
  );

  test.each([1, 2])("that keeps its bytes is the one that the document gives (%i)", (seed) => {
    const course = courseOf(read(randomCurves(seed)), seed, "bytes");
    expect(evidencesOf(course.state)).toEqual(evidencesOf(stateOf(course.document)));
  });

  test("loses no digits to downdates, and is made anew before it would", () => {
    const document = read(randomCurves(7, { level: 2_460_000, unit: 1e-4, count: 300 }));
    const course = new Course(document);
    course.post(document.measurements);
    for (let i = 0; i < 60; i += 1) course.withdraw(20 + 3 * (i % 40));
    const { remade } = course;
    expect(remade).toBeLessThan(6);
    expectSame(evidencesOf(course.state), evidencesOf(stateOf(course.document)), 1e-11);
    const [first] = course.document.measurements;
    course.post([{ ...first!, id: "sharp", sd: 1e-9 }]);
    course.withdraw(course.listed.length - 1);
    expect(course.remade).toBe(remade + 1);
    expectSame(evidencesOf(course.state), evidencesOf(stateOf(course.document)), 1e-11);
  });
});

test.each(names.filter((name) => !slow.includes(name)))(
  "a state of %s that keeps its bytes is the one that the document gives, to the last bit",
  (name) => {
    const course = courseOf(read(forms[name]), 5, "bytes");
    const whole = stateOf(course.document);
    expect(evidencesOf(course.state)).toEqual(evidencesOf(whole));
  },
);

describe("what is left of a measurand", () => {
  const document = documentFrom({
    observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
    measurands: [
      { key: "x", observable: "o", reference: { family: "uniform", lower: 0, upper: 10 } },
    ],
    hypotheses: [{ key: "h", title: "H", predictions: [{ measurand: "x", expected: 4 }] }],
    measurements: Array.from({ length: 400 }, (_, i) => ({
      id: `m${i}`,
      measurand: "x",
      value: 4 + Math.sin(i),
      sd: 1,
    })),
  });
  const lnOf = (state: EngineState) => evidencesOf(state)[0]!.lnEvidence!;

  function without(change: Partial<Measurement>) {
    const measurements = document.measurements.map((one, i) =>
      i === 7 ? { ...one, ...change } : one,
    );
    const course = new Course(document);
    course.post(measurements);
    course.withdraw(7);
    const whole = lnOf(stateOf(course.document));
    return { course, away: Math.abs(lnOf(course.state) / whole - 1) };
  }

  test("by a downdate has all its digits where one like the others goes", () => {
    const { course, away } = without({});
    expect(course.remade).toBe(0);
    expect(away).toBeLessThan(1e-12);
  });

  test("is summed up anew where the one that goes lay far away", () => {
    const { course, away } = without({ value: 4e6 });
    expect(course.remade).toBe(1);
    expect(away).toBeLessThan(1e-13);
  });

  test("is summed up anew where the one that goes had nearly all the weight", () => {
    const { course, away } = without({ sd: 1e-4 });
    expect(course.remade).toBe(1);
    expect(away).toBeLessThan(1e-13);
  });

  test("is summed up anew after many have gone, long before digits are", () => {
    const course = new Course(document);
    course.post(document.measurements);
    for (let i = 0; i < 390; i += 1) course.withdraw(5);
    expect(course.remade).toBeGreaterThan(0);
    expect(course.remade).toBeLessThan(10);
    expectSame(lnOf(course.state), lnOf(stateOf(course.document)), 1e-12);
  });
});
