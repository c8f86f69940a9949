import type { Campaign, CampaignDocument } from "@weighhouse/campaign/document";
import {
  numberFromText,
  numberToText,
  textOrNull,
  timeFromText,
  timeToText,
} from "../entered-text";

/** Text of the coordinator's forms, field by field as in the content, and the content it stands for. */
export interface CampaignDraft {
  title: string;
  key: string;
  summary: string;
  registrationCloses: string;
  dataCloses: string;
  rule: { coverage: string; pass: string; fail: string };
  noneOfThese: { weight: string };
  visibility: "public" | "members";
}

export const emptyCampaign: CampaignDraft = {
  title: "",
  key: "",
  summary: "",
  registrationCloses: "",
  dataCloses: "",
  rule: { coverage: "2", pass: "0.95", fail: "0.05" },
  noneOfThese: { weight: "0" },
  visibility: "public",
};

export function draftOfCampaign(
  campaign: Campaign,
  visibility: CampaignDraft["visibility"],
): CampaignDraft {
  return {
    title: campaign.title,
    key: campaign.key,
    summary: campaign.summary ?? "",
    registrationCloses: timeToText(campaign.registrationCloses),
    dataCloses: timeToText(campaign.dataCloses),
    rule: {
      coverage: numberToText(campaign.rule.coverage),
      pass: numberToText(campaign.rule.pass),
      fail: numberToText(campaign.rule.fail),
    },
    noneOfThese: { weight: numberToText(campaign.noneOfThese.weight) },
    visibility,
  };
}

export function campaignContent(draft: CampaignDraft) {
  return {
    title: draft.title.trim(),
    key: draft.key.trim(),
    summary: textOrNull(draft.summary),
    registrationCloses: timeFromText(draft.registrationCloses),
    dataCloses: timeFromText(draft.dataCloses),
    rule: {
      coverage: numberFromText(draft.rule.coverage),
      pass: numberFromText(draft.rule.pass),
      fail: numberFromText(draft.rule.fail),
    },
    noneOfThese: { weight: numberFromText(draft.noneOfThese.weight) },
    visibility: draft.visibility,
  };
}

export interface ObservableDraft {
  title: string;
  key: string;
  unit: string;
  scale: "linear" | "log10";
}

export const emptyObservable: ObservableDraft = { title: "", key: "", unit: "", scale: "linear" };

export function observableContent(draft: ObservableDraft) {
  return {
    title: draft.title.trim(),
    key: draft.key.trim(),
    unit: textOrNull(draft.unit),
    scale: draft.scale,
  };
}

export interface ThresholdDraft {
  title: string;
  key: string;
  value: string;
}

export interface MeasurandDraft {
  title: string;
  key: string;
  observable: string;
  window: { from: string; to: string };
  scatter: string;
  reference: {
    family: "uniform" | "normal";
    lower: string;
    upper: string;
    mean: string;
    sd: string;
    scatter: string;
  };
  thresholds: ThresholdDraft[];
}

export function emptyMeasurand(document: CampaignDocument): MeasurandDraft {
  return {
    title: "",
    key: "",
    observable: document.observables[0]?.key ?? "",
    window: { from: "", to: "" },
    scatter: "0",
    reference: { family: "uniform", lower: "", upper: "", mean: "", sd: "", scatter: "0" },
    thresholds: [],
  };
}

export function measurandContent(draft: MeasurandDraft) {
  const { reference } = draft;
  const scatter = numberFromText(reference.scatter);
  return {
    title: draft.title.trim(),
    key: draft.key.trim(),
    observable: draft.observable,
    window: { from: timeFromText(draft.window.from), to: timeFromText(draft.window.to) },
    shape: "constant",
    scatter: numberFromText(draft.scatter),
    reference:
      reference.family === "uniform"
        ? {
            family: "uniform",
            lower: numberFromText(reference.lower),
            upper: numberFromText(reference.upper),
            scatter,
          }
        : {
            family: "normal",
            mean: numberFromText(reference.mean),
            sd: numberFromText(reference.sd),
            scatter,
          },
    thresholds: draft.thresholds.map((threshold) => ({
      title: textOrNull(threshold.title),
      key: threshold.key.trim(),
      value: numberFromText(threshold.value),
    })),
  };
}

/** A range that doesn't go up is a fault of its upper end; the whole reference has no field. */
export function measurandField(draft: MeasurandDraft, path: readonly (string | number)[]): string {
  const name = path.join(".");
  if (name === "reference")
    return draft.reference.family === "uniform" ? "reference.upper" : "reference.sd";
  return name === "window" ? "window.to" : name;
}

export interface SharedErrorDraft {
  title: string;
  key: string;
  sd: string;
  per: "campaign" | "batch";
}

export const emptySharedError: SharedErrorDraft = { title: "", key: "", sd: "", per: "campaign" };

export function sharedErrorContent(draft: SharedErrorDraft) {
  return {
    title: textOrNull(draft.title),
    key: draft.key.trim(),
    sd: numberFromText(draft.sd),
    per: draft.per === "batch" ? "batch" : null,
  };
}

/** Facilities and teams: a title and a key. */
export interface NamedDraft {
  title: string;
  key: string;
}

export const emptyNamed: NamedDraft = { title: "", key: "" };

export function namedContent(draft: NamedDraft) {
  return { title: textOrNull(draft.title), key: draft.key.trim() };
}

export interface MemberDraft {
  email: string;
  role: "coordinator" | "member" | "reader";
  team: string;
}

export const emptyMember: MemberDraft = { email: "", role: "member", team: "" };

export function memberContent(draft: MemberDraft) {
  return { email: draft.email.trim(), role: draft.role, team: textOrNull(draft.team) };
}
