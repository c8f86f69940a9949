import * as z from "zod";

/** What the webhooks' routes give, as it is described; a test reads their answers by these. */
const time = z.iso.datetime();
const maybeTime = time.nullable();

export const webhookSchema = z.strictObject({
  id: z.string(),
  url: z.string(),
  movedBy: z.number().nullable(),
  turned: z.boolean(),
  madeBy: z.string(),
  madeAt: time,
  lastDeliveredAt: maybeTime,
  switchedOffAt: maybeTime.describe("Null: it is on."),
  switchedOffWhy: z.string().nullable(),
});

const deliverySchema = z.strictObject({
  id: z.string(),
  what: z.enum(["standings", "test"]),
  queuedAt: time,
  tries: z.int(),
  lastTryAt: maybeTime,
  lastStatus: z.int().nullable().describe("HTTP status of the last try; null: no answer came."),
  lastError: z.string().nullable(),
  deliveredAt: maybeTime,
  givenUpAt: maybeTime.describe("It is not tried again."),
});

export const listedWebhookSchema = webhookSchema.extend({ deliveries: z.array(deliverySchema) });
