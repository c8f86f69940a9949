import { describe, expect, it } from "vitest";
import { detailOf, verify } from "./testing/verify-marsh";
import { liesOfContainer } from "./testing/lies/of-container";
import { liesOfContent } from "./testing/lies/of-content";
import { liesOfLedger } from "./testing/lies/of-ledger";
import { liesOfReaders } from "./testing/lies/of-readers";

const corpus = { liesOfContainer, liesOfContent, liesOfLedger, liesOfReaders };

describe.each(Object.entries(corpus))("%s are found, each for its reason", (_, lies) => {
  it.each(lies)("$name", ({ make, check, reason }) => {
    const report = verify(make());
    expect(report.ok).toBe(false);
    expect(detailOf(report, check)).toContain("failed: ");
    expect(detailOf(report, check)).toContain(reason);
  });
});

it("sixty lies at least are told, each another one", () => {
  const names = Object.values(corpus).flatMap((lies) => lies.map(({ name }) => name));
  expect(names.length).toBeGreaterThanOrEqual(60);
  expect(new Set(names).size).toBe(names.length);
});
