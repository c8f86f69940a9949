import * as z from "zod";
import { predictionContentSchema } from "@weighhouse/campaign/entries";
import { key as partKey } from "@weighhouse/campaign/fields";
import { predictionSealSchema } from "@weighhouse/campaign/seals";
import { enter, requireOwnTeam } from "./access";
import { appended } from "./appended";
import { hypothesisOf } from "./declared-parts";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { authorOf, recordEntries } from "./record-entries";
import { checkOpened, sealHeld } from "./seal-content";
import type { SealedAppended } from "./seal-content";
import { timeAt } from "./time";

const { digest, measurand, until } = predictionSealSchema.shape;

/**
 * `held`: the prediction is given, and the server keeps it secret. `kept`: only its digest is given,
 * made by `weighhouse seal`, and its team opens it.
 */
export const sealPredictionInput = z.strictObject({
  key: z.string(),
  hypothesis: partKey,
  /** Held: when it is opened. Kept: until when at the latest its team opens it. */
  until,
  seal: z.discriminatedUnion("keeping", [
    z.strictObject({ keeping: z.literal("held"), prediction: predictionContentSchema }),
    z.strictObject({ keeping: z.literal("kept"), digest, measurand }),
  ]),
});

/** Seals a prediction: its measurand is public from now on, what it says is not until it is opened. */
export async function sealPrediction(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof sealPredictionInput>,
): Promise<SealedAppended> {
  const { key, hypothesis, until, seal } = parseInput(sealPredictionInput, input);
  const access = await enter(desk, actor, key, "seal-prediction");
  const measurand = seal.keeping === "held" ? seal.prediction.measurand : seal.measurand;
  const bound = { team: access.team, hypothesis, measurand };
  const held = seal.keeping === "held" ? sealHeld(access, bound, seal.prediction) : null;
  const made = held?.digest ?? (seal.keeping === "kept" ? seal.digest : "");
  const payload = { digest: made, hypothesis, measurand, until, keeping: seal.keeping };
  const stored = await recordEntries(desk, access, ({ document, parts, size }) => {
    requireOwnTeam(access, "seal-prediction", hypothesisOf(document, hypothesis).team);
    const entry = { kind: "prediction.sealed", payload } as const;
    if (held !== null) {
      const moment = { by: authorOf(access), at: timeAt(desk), size };
      const opened = { kind: "prediction.revealed", payload: held } as const;
      checkOpened(parts, [entry, opened], { ...moment, place: "/seal/prediction" });
    }
    return {
      entries: [entry],
      fields: [{ list: "hypotheses", key: hypothesis, pointer: "/hypothesis" }],
      pointer: seal.keeping === "kept" ? "/seal" : "",
      holds: held,
    };
  });
  return { ...appended(key, stored), digest: made };
}
