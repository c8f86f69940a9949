import * as z from "zod";
import {
  campaignSchema,
  conditionSchema,
  derivedSchema,
  facilitySchema,
  measurandSchema,
  observableSchema,
  referenceSchema,
  scales,
  sharedErrorSchema,
  teamSchema,
  thresholdSchema,
} from "./declarations";
import { list } from "./fields";
import {
  ensembleSchema,
  hypothesisSchema,
  parameterSchema,
  predictionSchema,
  priorSchema,
  tableSchema,
  toleranceCorrelationSchema,
  toleranceSchema,
} from "./hypothesis";
import { correlationSchema, limits, measurementSchema } from "./measurement";

export const CAMPAIGN_FORMAT = "weighhouse-campaign/1";

/**
 * The campaign document: form only. What must fit together (keys, scales, windows, units,
 * expressions) is checked by `readCampaign`, which also fills what depends on other parts.
 */
export const campaignDocumentSchema = z.strictObject({
  format: z.literal(CAMPAIGN_FORMAT),
  campaign: campaignSchema,
  observables: list(observableSchema),
  measurands: list(measurandSchema),
  derived: list(derivedSchema),
  sharedErrors: list(sharedErrorSchema),
  facilities: list(facilitySchema),
  teams: list(teamSchema),
  hypotheses: list(hypothesisSchema),
  measurements: list(measurementSchema),
  correlations: list(correlationSchema),
});

/** A document whose form is right, before what depends on other parts is filled. */
export type DocumentForm = z.output<typeof campaignDocumentSchema>;

export type Scale = (typeof scales)[number];
export type Limit = (typeof limits)[number];
export type Campaign = z.output<typeof campaignSchema>;
export type Condition = z.output<typeof conditionSchema>;
export type Observable = z.output<typeof observableSchema>;
export type Reference = z.output<typeof referenceSchema>;
export type Threshold = z.output<typeof thresholdSchema>;
export type Measurand = z.output<typeof measurandSchema>;
export type DerivedForm = z.output<typeof derivedSchema>;
export type Derived = Omit<DerivedForm, "scored"> & { scored: boolean };
export type SharedError = z.output<typeof sharedErrorSchema>;
export type Facility = z.output<typeof facilitySchema>;
export type Team = z.output<typeof teamSchema>;
export type Prior = z.output<typeof priorSchema>;
export type Parameter = z.output<typeof parameterSchema>;
export type Table = z.output<typeof tableSchema>;
export type Ensemble = z.output<typeof ensembleSchema>;
export type Tolerance = z.output<typeof toleranceSchema>;
export type Prediction = z.output<typeof predictionSchema>;
export type ToleranceCorrelation = z.output<typeof toleranceCorrelationSchema>;
export type Hypothesis = z.output<typeof hypothesisSchema>;
export type Measurement = z.output<typeof measurementSchema>;
export type Correlation = z.output<typeof correlationSchema>;

/** A whole document as read: every optional field holds its value, its default or null. */
export type CampaignDocument = Omit<DocumentForm, "derived"> & { derived: Derived[] };
