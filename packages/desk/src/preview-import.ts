import type * as z from "zod";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import type { Order, Standings } from "@weighhouse/campaign/standings";
import { findCampaign } from "@weighhouse/store/campaigns";
import { StoreError } from "@weighhouse/store/store-error";
import { requireAccount } from "./access";
import type { Actor, Desk } from "./desk";
import { importCampaignInput } from "./import-campaign";
import { parseInput } from "./parse-input";
import { planImport } from "./plan-import";
import type { ImportPlan } from "./plan-import";
import { timeAt } from "./time";

export const previewImportInput = importCampaignInput;

export type ImportPreview = {
  /** What is wrong with the document, by pointers into it; nothing can be imported then. */
  problems: Problem[];
  /** What would be made; null where there are problems. */
  plan: PlannedImport | null;
};

export type PlannedImport = {
  key: string;
  title: string;
  /** Whether a campaign here has that key already: another one must be chosen. */
  taken: boolean;
  /** How many of each the new campaign would have; the ledger's entries with the opening one. */
  counts: Record<
    "entries" | "observables" | "measurands" | "hypotheses" | "predictions" | "measurements",
    number
  >;
  /** A closing date that has passed: registration is closed by an entry of the import instead. */
  registrationClosed: string | null;
  /** Each prediction whose order changes, since the ledger dates it anew. */
  orders: { hypothesis: string; measurand: string; claimed: Order; here: Order }[];
  /** The standings that the document has, and those that the campaign would have here. */
  standings: { claimed: Standings; here: Standings };
};

/** What importing a campaign document would make of it, its own dates counting for nothing. */
export async function previewImport(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof previewImportInput>,
): Promise<ImportPreview> {
  const { text, key } = parseInput(previewImportInput, input);
  requireAccount(actor, "import-campaign");
  const planned = planImport({ text, key, now: timeAt(desk) });
  if (!planned.ok) return { problems: planned.problems, plan: null };
  const { plan } = planned;
  const { document, opening } = plan;
  return {
    problems: [],
    plan: {
      key: opening.key,
      title: opening.title,
      taken: await isTaken(desk, opening.key),
      counts: countsOf(document, plan),
      registrationClosed:
        opening.registrationCloses === document.campaign.registrationCloses
          ? null
          : document.campaign.registrationCloses,
      orders: changedOrders(plan),
      standings: plan.standings,
    },
  };
}

async function isTaken(desk: Desk, key: string): Promise<boolean> {
  try {
    await findCampaign(desk.store, key);
    return true;
  } catch (error) {
    if (error instanceof StoreError && error.code === "no-such-campaign") return false;
    throw error;
  }
}

function countsOf(document: CampaignDocument, plan: ImportPlan): PlannedImport["counts"] {
  return {
    entries: plan.entries.length + 1,
    observables: document.observables.length,
    measurands: document.measurands.length,
    hypotheses: document.hypotheses.length,
    predictions: document.hypotheses.reduce((sum, { predictions }) => sum + predictions.length, 0),
    measurements: document.measurements.length,
  };
}

function changedOrders({ standings: { claimed, here } }: ImportPlan): PlannedImport["orders"] {
  const name = (row: { hypothesis: string; measurand: string }) =>
    `${row.hypothesis} ${row.measurand}`;
  const orders = new Map(here.verdicts.map((row) => [name(row), row.order]));
  return claimed.verdicts.flatMap((row) => {
    const order = orders.get(name(row)) ?? row.order;
    const { hypothesis, measurand } = row;
    return order === row.order ? [] : [{ hypothesis, measurand, claimed: row.order, here: order }];
  });
}
