import type { CampaignDocument } from "@weighhouse/campaign/document";
import { scoreCampaign } from "@weighhouse/engine/score";
import { sensitivityOf } from "@weighhouse/engine/sensitivity/sensitivity";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { nodeVerifySignature } from "@weighhouse/ledger/node-keys";
import { formatTreeHead, signTreeHead } from "@weighhouse/ledger/tree-head";
import type { CheckName, VerifyReport } from "../checks/line";
import { verifyArchive } from "../verify";
import type { VerifyOptions } from "../verify";
import { LEDGER_ID } from "./archive-input";
import { fixedSigner } from "./synthetic-ledger";

/** Who keeps the marsh's ledger, and who would like to have kept another. */
export const house = fixedSigner("house.example", 1);
export const forger = fixedSigner("house.example", 9);

/** Verifies as the command does. */
export function verify(bytes: Uint8Array, options: Partial<VerifyOptions> = {}): VerifyReport {
  return verifyArchive(bytes, {
    hasher: nodeHasher,
    verifySignature: nodeVerifySignature,
    score: scoreCampaign,
    sensitivity: rememberedSensitivity,
    ...options,
  });
}

const remembered = new Map<string, ReturnType<typeof sensitivityOf>>();

/** Computed once for each document: tests verify hundreds of archives of the same one. */
function rememberedSensitivity(document: CampaignDocument): ReturnType<typeof sensitivityOf> {
  const text = JSON.stringify(document);
  const known = remembered.get(text) ?? sensitivityOf(document);
  remembered.set(text, known);
  return known;
}

/** `outcome: detail` of one line. */
export function detailOf(report: VerifyReport, check: CheckName): string {
  const found = report.lines.find((each) => each.check === check);
  return `${found?.outcome}: ${found?.detail}`;
}

export function failures(report: VerifyReport): CheckName[] {
  return report.lines.filter(({ outcome }) => outcome === "failed").map(({ check }) => check);
}

/** A head that the house signed, of whatever it is told. */
export function signedHead(size: number, root: Uint8Array, origin = LEDGER_ID): string {
  return signTreeHead(formatTreeHead({ origin, size, root }), house);
}
