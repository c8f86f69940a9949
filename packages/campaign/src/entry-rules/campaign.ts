import { citationCode } from "../citation-code";
import type { RecordOf } from "../ledger-record";
import type { PartsBefore } from "../parts";
import type { Problem } from "../problem";
import { sortedJson } from "../sorted-json";
import { STANDINGS_FORMAT } from "../standings";
import { isMeasured } from "./declarations";
import { campaignOf, fault, hasPassed } from "./rule";

export function amendedCampaign(
  before: PartsBefore,
  { payload, at }: RecordOf<"campaign.amended">,
): Problem | null {
  const campaign = campaignOf(before);
  if (payload.key !== campaign["key"]) {
    return fault(
      "/key",
      "contradiction",
      payload.key,
      `${sortedJson(campaign["key"])}: keys never change`,
    );
  }
  const measured = [...before.all("measurand")].some(({ content }) => isMeasured(content));
  if (measured && sortedJson(payload.rule) !== sortedJson(campaign["rule"])) {
    const allowed = `${sortedJson(campaign["rule"])}: a measurement is there`;
    return fault("/rule", "contradiction", sortedJson(payload.rule), allowed);
  }
  const closes = campaign["registrationCloses"];
  if (hasPassed(closes, at) && payload.registrationCloses !== closes) {
    const found = payload.registrationCloses ?? "no date";
    const allowed = `${String(closes)}: registration is closed`;
    return fault("/registrationCloses", "contradiction", found, allowed);
  }
  return null;
}

export function closedRegistration(
  before: PartsBefore,
  { payload, at, by }: RecordOf<"registration.closed">,
): Problem | null {
  const { registrationCloses: closes, registrationClosed: closed } = campaignOf(before);
  const passed = hasPassed(closes, at);
  if ((closed ?? null) !== null || (passed && payload.by === "coordinator")) {
    const found = `registration closed since ${sortedJson(closes)}`;
    return fault("", "contradiction", found, "closing it once");
  }
  if (payload.by === "clock" && (!passed || !("system" in by))) {
    const allowed = "the coordinator's closing, or the clock's once registrationCloses has passed";
    return fault("/by", "contradiction", `the clock's closing at ${at}`, allowed);
  }
  return null;
}

export function citedStandings(
  before: PartsBefore,
  { seq, payload: { code, standings } }: RecordOf<"standings.cited">,
): Problem | null {
  const { format, campaign, asOf } = standings;
  const size = (asOf as { size?: unknown } | null | undefined)?.size;
  if (format !== STANDINGS_FORMAT || campaign !== campaignOf(before)["key"] || size !== seq) {
    const found = sortedJson({ format, campaign, size });
    return fault("/standings", "contradiction", found, `this campaign's as of size ${seq}`);
  }
  const made = citationCode(standings);
  return code === made ? null : fault("/code", "contradiction", code, `${made}, of the standings`);
}

/** Who runs the installation declares it, not who takes part in the campaign. */
export function restoredLedger(
  _before: PartsBefore,
  { seq, by, payload: { after } }: RecordOf<"ledger.restored">,
): Problem | null {
  if (!("system" in by)) {
    return fault("", "not-applicable", "a member's entry", "one by the system");
  }
  if (after === seq) return null;
  return fault("/after", "contradiction", String(after), `${seq}, the size before this entry`);
}
