import * as z from "zod";
import { key as partKey } from "@weighhouse/campaign/fields";
import { openingSchema, predictionSealSchema } from "@weighhouse/campaign/seals";
import { openSeal } from "@weighhouse/desk/open-seal";
import type { openSealInput } from "@weighhouse/desk/open-seal";
import { sealMeasurement } from "@weighhouse/desk/seal-measurement";
import { sealPrediction } from "@weighhouse/desk/seal-prediction";
import { appendedSchema } from "./ledger-answers";
import { readJson } from "./read-body";
import { created } from "./respond";
import { route } from "./route";

const group = "Seals";
const scope = "seals";
const MAX_BYTES = 2 * 1024 * 1024;

const { digest, measurand, until } = predictionSealSchema.shape;
const keptSealSchema = z.strictObject({
  digest,
  measurand,
  until,
  hypothesis: partKey.nullish().describe("Of a prediction; absent for a measurement."),
});

export const sealRoutes = [
  route({
    method: "POST",
    path: "seals",
    group,
    summary: "Put a seal on record",
    says: "Files the digest of a prediction, where the body names a hypothesis, or of a measurement, made by weighhouse seal; its team keeps the content and opens it.",
    scope,
    once: true,
    takes: {
      "application/json": { schema: keptSealSchema, says: "The seal.", maxBytes: MAX_BYTES },
    },
    gives: {
      status: 201,
      types: {
        "application/json": { schema: appendedSchema.extend({ digest }), says: "The entry." },
      },
    },
    async answer({ desk, actor, request, key }) {
      const { hypothesis, until, digest, measurand, ...others } = await readJson(request);
      const seal = { keeping: "kept", digest, measurand, ...others } as never;
      const kept = { key, until: until as string, seal };
      const sealed =
        hypothesis === undefined || hypothesis === null
          ? await sealMeasurement(desk, actor, kept)
          : await sealPrediction(desk, actor, { ...kept, hypothesis: hypothesis as string });
      return created(sealed);
    },
  }),
  route({
    method: "POST",
    path: "seals/openings",
    group,
    summary: "Open a seal",
    says: "Shows what a seal was made of: its nonce and its content.",
    scope,
    once: true,
    takes: {
      "application/json": { schema: openingSchema, says: "The opening.", maxBytes: MAX_BYTES },
    },
    gives: {
      status: 201,
      types: { "application/json": { schema: appendedSchema, says: "The entry." } },
    },
    async answer({ desk, actor, request, key }) {
      const opening = (await readJson(request)) as Omit<z.input<typeof openSealInput>, "key">;
      return created(await openSeal(desk, actor, { ...opening, key }));
    },
  }),
];
