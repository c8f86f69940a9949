import { assert, constantFrom, property } from "fast-check";
import { expect, test } from "vitest";
import { problemLine } from "../problem";
import { readCampaign } from "../read";
import { junk, placesOf, put } from "./documents";
import { everyForm } from "./every-form";

test.each(Object.entries(everyForm()))("the campaign %s is valid", (_name, document) => {
  const read = readCampaign(document);
  expect(read.ok ? [] : read.problems.map(problemLine)).toEqual([]);
});

/** What a value's place is called, so that each choice of the format can be looked for. */
function choicesIn(value: unknown, name: string, found: Set<string>): Set<string> {
  if (typeof value === "string") found.add(`${name}=${value}`);
  if (typeof value !== "object" || value === null) return found;
  for (const [member, inner] of Object.entries(value)) {
    choicesIn(inner, Array.isArray(value) ? name : member, found);
    if (inner !== null) found.add(member);
  }
  return found;
}

test("the whole of them uses every choice of the format", () => {
  const found = choicesIn(readWholeForm(), "document", new Set());
  const families = ["normal", "lognormal", "uniform", "loguniform", "halfnormal", "fixed"];
  families.push("polynomial", "gamma", "interval", "atMost", "atLeast", "splitNormal");
  const scales = ["linear", "log10", "cyclic", "magnitude", "event", "count"];
  const limits = ["upper", "lower", "fainter", "brighter"];
  const fields =
    "epoch table where window shape scatter thresholds closed replacedBy period relative per " +
    "weights columns given probability withheld registeredAt toleranceCorrelations knownSince " +
    "sdDex plus minus confidence sigmas noise occurred efficiency falseAlarm count exposure " +
    "background status source extra shared sameData setAside correlations scored from group";
  for (const choice of [
    ...families.map((one) => `family=${one}`),
    ...scales.map((one) => `scale=${one}`),
    ...limits.map((one) => `limit=${one}`),
    ...["common", "each", "smooth"].map((one) => `sharing=${one}`),
    ...fields.split(" "),
  ]) {
    expect(found).toContain(choice);
  }
});

function readWholeForm() {
  const read = readCampaign(everyForm().whole);
  if (!read.ok) throw new Error("the whole campaign isn't valid");
  return read.value;
}

test("none of them, with anything in any place, is more than refused", () => {
  const documents = everyForm();
  const places = Object.entries(documents).flatMap(([name, document]) =>
    name === "whole" ? [] : placesOf(document).map((path) => ({ document, path })),
  );
  assert(
    property(constantFrom(...places), junk, ({ document, path }, value) => {
      const read = readCampaign(put(structuredClone(document), path, value));
      if (read.ok) return;
      for (const problem of read.problems)
        expect(problemLine(problem)).toMatch(/found .+ allowed ./);
    }),
    { numRuns: 1000, seed: 20340301 },
  );
});
