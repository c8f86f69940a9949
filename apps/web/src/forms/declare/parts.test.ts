import type { CampaignDocument } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { countOf, firstMissing, partFrom, parts } from "./parts";

function campaign(counts: Partial<Record<string, number>>): CampaignDocument {
  const list = (name: string) => Array.from({ length: counts[name] ?? 0 }, () => ({}));
  return {
    observables: list("observables"),
    measurands: list("measurands"),
    sharedErrors: list("sharedErrors"),
    facilities: list("facilities"),
    teams: list("teams"),
  } as unknown as CampaignDocument;
}

test("declaring goes on at the first part that is needed and missing", () => {
  expect(firstMissing(campaign({}))).toBe("observables");
  expect(firstMissing(campaign({ observables: 1 }))).toBe("quantities");
  expect(firstMissing(campaign({ observables: 1, measurands: 1 }))).toBe("facilities");
  const whole = campaign({ observables: 1, measurands: 1, facilities: 1, teams: 1 });
  expect(firstMissing(whole)).toBe("quantities");
});

test("every part has an address, and nothing else has", () => {
  for (const part of parts) expect(partFrom(part)).toBe(part);
  expect(partFrom("measurements")).toBeNull();
});

test("only lists are counted", () => {
  expect(countOf(campaign({ teams: 3 }), "teams")).toBe(3);
  expect(countOf(campaign({}), "campaign")).toBeNull();
});
