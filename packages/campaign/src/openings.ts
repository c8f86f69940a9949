import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import { measurementContentSchema, predictionContentSchema } from "./entries";
import type { MeasurementContent, Payload, PredictionContent } from "./entries";
import { readForm } from "./form";
import type { PartContent } from "./parts";
import type { Problem } from "./problem";

type Opening = Payload<"prediction.revealed">;

/** The digest of what is opened, as of what the seal binds: another's content has another. */
export function openedDigest(
  { nonce, content }: Opening,
  seal: PartContent,
  ledger: string,
): string {
  const { team, hypothesis, measurand } = seal as {
    team: string | null;
    hypothesis: string | null;
    measurand: string;
  };
  return sealDigest(nobleHasher, { ledger, team, hypothesis, measurand, nonce, content });
}

/** What is wrong with the form of a sealed content; empty where it is a prediction or measurement. */
export function contentFaults(of: "prediction" | "measurement", content: unknown): Problem[] {
  const schema = of === "prediction" ? predictionContentSchema : measurementContentSchema;
  return readForm(schema, content, "/content").problems;
}

export function openedPrediction({ content }: Opening): PredictionContent {
  return readForm(predictionContentSchema, content, "").value as PredictionContent;
}

/** The sealed measurement; its team is the one that sealed it, where it names none. */
export function openedMeasurement({ content }: Opening, seal: PartContent): MeasurementContent {
  const read = readForm(measurementContentSchema, content, "");
  const measurement = read.value as MeasurementContent;
  return { ...measurement, team: measurement.team ?? (seal["team"] as string | null) };
}
