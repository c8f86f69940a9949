import { describe, expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

function documentOf(registeredAt: string | null, dates: Part, more: Part = {}) {
  const { hypothesis, measurand, campaign } = more as { [part: string]: Part | undefined };
  return documentFrom({
    campaign: { key: "k", title: "K", ...campaign },
    observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
    measurands: [
      {
        key: "x",
        observable: "o",
        reference: { family: "uniform", lower: 0, upper: 10 },
        ...measurand,
      },
    ],
    hypotheses: [
      {
        key: "h",
        title: "H",
        registeredAt,
        predictions: [{ measurand: "x", expected: 3, decisive: true }],
        ...hypothesis,
      },
    ],
    measurements: [{ id: "a", measurand: "x", value: 5, sd: 0.1, ...dates }],
  });
}

function orderOf(...given: Parameters<typeof documentOf>) {
  return standingsFrom(documentOf(...given)).verdicts[0]!.order;
}

const day = (n: number) => `2031-03-0${n}T00:00:00Z`;
const dates = { observedAt: day(3), postedAt: day(5) };

describe("a prediction is", () => {
  test("before observation when filed before every observation", () => {
    expect(orderOf(day(2), dates)).toBe("before-observation");
    expect(orderOf("2031-03-02T23:59:59.999999Z", dates)).toBe("before-observation");
  });

  test("before posting when somebody could have seen the data", () => {
    expect(orderOf(day(3), dates)).toBe("before-posting");
    expect(orderOf("2031-03-04T23:59:59.999999Z", dates)).toBe("before-posting");
  });

  test("after data from the moment of posting, of being known, or of closing", () => {
    expect(orderOf(day(5), dates)).toBe("after");
    expect(orderOf("2031-03-05T00:00:00.000000Z", dates)).toBe("after");
    expect(orderOf(day(4), { ...dates, knownSince: day(4) })).toBe("after");
    const campaign = { registrationCloses: day(1) };
    expect(orderOf(day(1), dates, { campaign })).toBe("before-observation");
    expect(orderOf(day(2), dates, { campaign })).toBe("after");
  });

  test("undated without a date on either side", () => {
    expect(orderOf(null, dates)).toBe("undated");
    expect(orderOf(day(2), {})).toBe("undated");
  });

  test("dated by its own registration before its hypothesis's", () => {
    const predictions = [{ measurand: "x", expected: 3, registeredAt: day(6) }];
    expect(orderOf(day(2), dates, { hypothesis: { predictions } })).toBe("after");
  });

  test("held against measurements that were withdrawn, and those set aside", () => {
    const measurand = { firstPostedAt: day(2), firstObservedAt: day(1) };
    expect(orderOf(day(2), dates, { measurand })).toBe("after");
    expect(orderOf(day(5), { ...dates, setAside: { reason: "for the test" } })).toBe("after");
  });
});

describe("a prediction filed after data", () => {
  const after = documentOf(day(6), dates);

  test("is silent, its verdict listed and not in the counts", () => {
    const { hypotheses, verdicts, noModel, warnings } = standingsFrom(after);
    expect(verdicts[0]).toMatchObject({ order: "after", verdict: "fail", lower: 3 });
    expect(hypotheses[0]).toMatchObject({ compared: 0, silent: 1, failedDecisive: [] });
    expect(hypotheses[0]!.lnEvidence).toBe(noModel.lnEvidence);
    expect(hypotheses[0]!.verdicts.fail).toBe(0);
    expect(warnings).toMatchObject([
      { code: "filed-after-excluded", at: "/hypotheses/0/predictions/0" },
    ]);
  });

  test("counts when asked for", () => {
    const { hypotheses, verdicts, warnings } = standingsFrom(after, { includeAfter: true });
    const [before] = standingsFrom(documentOf(day(1), dates)).hypotheses;
    expect(hypotheses[0]!.lnEvidence).toBe(before!.lnEvidence);
    expect(hypotheses[0]).toMatchObject({ compared: 1, silent: 0, failedDecisive: ["x"] });
    expect(verdicts[0]!.order).toBe("after");
    expect(warnings.map(({ code }) => code)).not.toContain("filed-after-excluded");
  });
});
