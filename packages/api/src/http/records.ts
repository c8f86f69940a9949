import * as z from "zod";
import {
  correctMeasurements,
  correctMeasurementsInput,
  previewCorrections,
} from "@weighhouse/desk/correct-measurements";
import {
  setAsideMeasurement,
  setAsideMeasurementInput,
} from "@weighhouse/desk/set-aside-measurement";
import {
  previewWithdrawal,
  previewWithdrawalInput,
  withdrawMeasurements,
  withdrawMeasurementsInput,
} from "@weighhouse/desk/withdraw-measurements";
import { appendedSchema } from "./ledger-answers";
import { previewSchema } from "./measurement-answers";
import { readJson } from "./read-body";
import { created } from "./respond";
import { route } from "./route";

const group = "Measurements";
const scope = "measurements:correct";
const MAX_BYTES = 32 * 1024 * 1024;
const JSON_TYPE = "application/json";

const { size, changes } = previewSchema.shape;
const ids = z.array(z.string());

export const correctedSchema = z.strictObject({
  key: z.string().describe("The campaign's."),
  corrected: ids.describe("Those that have a new content."),
  unchanged: ids.describe("Those that were so already."),
  appended: appendedSchema.nullable(),
});

export const correctionsPreviewSchema = z.strictObject({
  size,
  corrections: z.array(
    z.strictObject({
      id: z.string(),
      fields: z
        .array(z.strictObject({ field: z.string(), before: z.unknown(), after: z.unknown() }))
        .describe("What would be otherwise."),
    }),
  ),
  changes,
});

export const withdrawalPreviewSchema = z.strictObject({ size, ids, changes });

/** A body of one form, which the use-case reads: all that is in it is told as it says it. */
const takes = (input: z.ZodObject, says: string) => ({
  [JSON_TYPE]: { schema: input.omit({ key: true }), says, maxBytes: MAX_BYTES },
});
const gives = (status: 200 | 201, schema: z.ZodType, says: string) => ({
  status,
  types: { [JSON_TYPE]: { schema, says } },
});

export const recordRoutes = [
  route({
    method: "POST",
    path: "corrections",
    group,
    summary: "Correct measurements",
    says: "Gives each its new content for a stated reason, all or none. What it was stays on record.",
    scope,
    once: true,
    takes: takes(correctMeasurementsInput, "The contents as they should be, with the reasons."),
    gives: gives(201, correctedSchema, "What was corrected."),
    async answer({ desk, actor, request, key }) {
      return created(await correctMeasurements(desk, actor, await inputOf(request, key)));
    },
  }),
  route({
    method: "POST",
    path: "corrections/preview",
    group,
    summary: "Try corrections",
    says: "Takes what corrections take, enters nothing, and tells what would be otherwise.",
    scope,
    rate: "heavy",
    takes: takes(correctMeasurementsInput, "The contents as they should be, with the reasons."),
    gives: gives(200, correctionsPreviewSchema, "What would change."),
    async answer({ desk, actor, request, key }) {
      return told(await previewCorrections(desk, actor, await inputOf(request, key)));
    },
  }),
  route({
    method: "POST",
    path: "withdrawals",
    group,
    summary: "Withdraw measurements",
    says: "By their ids, or all that was observed within a range, of a facility or of all. The standings are as if they had never been posted; their entries stay.",
    scope,
    once: true,
    takes: takes(withdrawMeasurementsInput, "Which, and why."),
    gives: gives(201, appendedSchema, "The entries."),
    async answer({ desk, actor, request, key }) {
      return created(await withdrawMeasurements(desk, actor, await inputOf(request, key)));
    },
  }),
  route({
    method: "POST",
    path: "withdrawals/preview",
    group,
    summary: "Try a withdrawal",
    says: "Enters nothing, and tells what would be withdrawn and what that would change.",
    scope,
    rate: "heavy",
    takes: takes(previewWithdrawalInput, "Which."),
    gives: gives(200, withdrawalPreviewSchema, "What would be withdrawn."),
    async answer({ desk, actor, request, key }) {
      return told(await previewWithdrawal(desk, actor, await inputOf(request, key)));
    },
  }),
  route({
    method: "POST",
    path: "set-asides",
    group,
    summary: "Set a measurement aside",
    says: "It stays listed and counts no more.",
    scope,
    once: true,
    takes: takes(setAsideMeasurementInput, "Which, and why."),
    gives: gives(201, appendedSchema, "The entry."),
    async answer({ desk, actor, request, key }) {
      return created(await setAsideMeasurement(desk, actor, await inputOf(request, key)));
    },
  }),
];

/** What was sent, with the campaign that the address names; the use-case's own schema reads it. */
async function inputOf(request: Request, key: string): Promise<never> {
  return { ...(await readJson(request)), key } as never;
}

function told(value: unknown): Response {
  return new Response(`${JSON.stringify(value)}\n`, {
    headers: { "content-type": JSON_TYPE, "cache-control": "no-store" },
  });
}
