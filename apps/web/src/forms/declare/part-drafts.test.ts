import { payloadSchemas } from "@weighhouse/campaign/entries";
import type { Campaign } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import {
  campaignContent,
  draftOfCampaign,
  emptyCampaign,
  measurandContent,
  measurandField,
  memberContent,
  sharedErrorContent,
  type MeasurandDraft,
} from "./part-drafts";

const measurand: MeasurandDraft = {
  title: "Speed in May",
  key: "speed-may",
  observable: "speed",
  window: { from: "2031-05-01", to: "2031-06-01 12:00" },
  scatter: "0",
  reference: { family: "uniform", lower: "-1", upper: "4", mean: "9", sd: "", scatter: "0" },
  thresholds: [{ title: "", key: "alarm", value: "3" }],
};

test("a campaign's form opens with the rule's defaults and takes times in UTC", () => {
  const content = campaignContent({
    ...emptyCampaign,
    title: " Warm bed ",
    key: "warm-bed",
    registrationCloses: "2031-03-01",
  });
  expect(payloadSchemas["campaign.amended"].parse(content)).toMatchObject({
    title: "Warm bed",
    registrationCloses: "2031-03-01T00:00:00Z",
    dataCloses: null,
    rule: { coverage: 2, pass: 0.95, fail: 0.05 },
    visibility: "public",
  });
});

test("a campaign shown in its form and sent back unchanged is the same campaign", () => {
  const { visibility: _visibility, ...fields } = campaignContent({
    ...emptyCampaign,
    title: "A",
    key: "a",
    dataCloses: "2031-03-01 09:30",
  });
  const back = campaignContent(draftOfCampaign(fields as unknown as Campaign, "members"));
  expect(back).toEqual({ ...fields, visibility: "members" });
});

test("only the chosen family's numbers are sent", () => {
  expect(measurandContent(measurand).reference).toEqual({
    family: "uniform",
    lower: -1,
    upper: 4,
    scatter: 0,
  });
  const normal = { ...measurand.reference, family: "normal" as const, sd: "2" };
  expect(measurandContent({ ...measurand, reference: normal }).reference).toEqual({
    family: "normal",
    mean: 9,
    sd: 2,
    scatter: 0,
  });
});

test("the quantity's content is what the server's schema reads", () => {
  const read = payloadSchemas["measurand.declared"].parse(measurandContent(measurand));
  expect(read.window).toEqual({ from: "2031-05-01T00:00:00Z", to: "2031-06-01T12:00:00Z" });
  expect(read.thresholds).toEqual([{ key: "alarm", title: "alarm", value: 3 }]);
});

test("what is wrong with a whole range stands at its last field", () => {
  expect(measurandField(measurand, ["reference"])).toBe("reference.upper");
  expect(measurandField(measurand, ["window"])).toBe("window.to");
  expect(measurandField(measurand, ["thresholds", 0, "value"])).toBe("thresholds.0.value");
});

test("a shared error is one for the campaign or one for each batch", () => {
  expect(sharedErrorContent({ title: "", key: "zero", sd: "0.1", per: "batch" }).per).toBe("batch");
  expect(sharedErrorContent({ title: "", key: "zero", sd: "0.1", per: "campaign" }).per).toBeNull();
});

test("a member of no team has no team", () => {
  expect(memberContent({ email: " a@b.example ", role: "reader", team: "" })).toEqual({
    email: "a@b.example",
    role: "reader",
    team: null,
  });
});
