import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { ChangeKind } from "@weighhouse/campaign/sensitivity";
import type { Standings } from "@weighhouse/campaign/standings";
import { withPrior, withReferences, withTolerances } from "./widths";

/** A campaign as it would be with one thing changed. */
export interface Change {
  kind: ChangeKind;
  /** What was changed; null: all of its kind. */
  key: string | null;
  document: CampaignDocument;
}

/** Every change of section 10, single measurements apart, that would change something. */
export function changesOf(document: CampaignDocument, standings: Standings): Change[] {
  return [
    ...withoutParts(document),
    ...withoutProvisional(document),
    ...onlyBeforeObservation(document, standings),
    ...swappedAlternatives(document),
    ...otherSharedErrors(document),
    ...otherWidths(document),
    ...inflatedDisagreements(document, standings),
    ...equalWeights(document),
  ];
}

/** The campaign without some of its measurements; its declarations and its first dates stay. */
export function without(
  document: CampaignDocument,
  goes: (measurement: Measurement) => boolean,
): CampaignDocument {
  const measurements = document.measurements.filter((one) => !goes(one));
  if (document.correlations.length === 0) return { ...document, measurements };
  const ids = new Set(measurements.map(({ id }) => id));
  const correlations = document.correlations.filter(({ a, b }) => ids.has(a) && ids.has(b));
  return { ...document, measurements, correlations };
}

function withoutParts(document: CampaignDocument): Change[] {
  const fields = [
    ["without-facility", "facility"],
    ["without-measurand", "measurand"],
    ["without-team", "team"],
  ] as const;
  return fields.flatMap(([kind, field]) =>
    countedValues(document, field).map((key) => ({
      kind,
      key,
      document: without(document, (one) => one[field] === key),
    })),
  );
}

/** What stands in a field of counted measurements, in the order of its first appearance. */
function countedValues(
  { measurements }: CampaignDocument,
  field: "facility" | "measurand" | "team",
): string[] {
  const values = new Set<string>();
  for (const one of measurements) {
    const value = one[field];
    if (one.setAside === null && value !== null) values.add(value);
  }
  return [...values];
}

function withoutProvisional(document: CampaignDocument): Change[] {
  const provisional = (one: Measurement) => one.status === "provisional";
  if (!document.measurements.some((one) => one.setAside === null && provisional(one))) return [];
  return [{ kind: "without-provisional", key: null, document: without(document, provisional) }];
}

function onlyBeforeObservation(document: CampaignDocument, { verdicts }: Standings): Change[] {
  const early = new Set(
    verdicts
      .filter(({ order }) => order === "before-observation")
      .map(({ hypothesis, measurand }) => `${hypothesis} ${measurand}`),
  );
  // Without dates, or with none that early, nothing would be left to compare.
  if (early.size === 0) return [];
  const hypotheses = document.hypotheses.map((one) => ({
    ...one,
    predictions: one.predictions.filter(({ measurand }) => early.has(`${one.key} ${measurand}`)),
    toleranceCorrelations: one.toleranceCorrelations.filter(
      ({ a, b }) => early.has(`${one.key} ${a}`) && early.has(`${one.key} ${b}`),
    ),
  }));
  const some = hypotheses.some(
    ({ predictions }, i) => predictions.length < document.hypotheses[i]!.predictions.length,
  );
  if (!some) return [];
  return [{ kind: "only-before-observation", key: null, document: { ...document, hypotheses } }];
}

/** A measurement set aside for another reading of the same data, counted in that one's place. */
function swappedAlternatives(document: CampaignDocument): Change[] {
  const counted = new Set(
    document.measurements.filter((one) => one.setAside === null).map(({ sameData }) => sameData),
  );
  const alternatives = document.measurements.filter(
    (one) => one.setAside !== null && one.sameData !== null && counted.has(one.sameData),
  );
  return alternatives.filter(isComplete).map((alternative) => ({
    kind: "same-data-swapped",
    key: alternative.id,
    document: {
      ...document,
      measurements: document.measurements.map((one) => {
        if (one === alternative) return { ...one, setAside: null };
        if (one.sameData !== alternative.sameData || one.setAside !== null) return one;
        return { ...one, setAside: { reason: `in favour of ${alternative.id}` } };
      }),
    },
  }));
}

/** Whether it has a result that could be counted: one that is set aside needs no uncertainty. */
function isComplete(one: Measurement): boolean {
  const { sd, sdDex, plus, confidence, sigmas, occurred, count } = one;
  return [sd, sdDex, plus, confidence, sigmas, occurred, count].some((field) => field !== null);
}

function otherSharedErrors(document: CampaignDocument): Change[] {
  const loaded = new Set(
    document.measurements.flatMap(({ shared, setAside }) =>
      setAside === null ? shared.map(({ error }) => error) : [],
    ),
  );
  return document.sharedErrors
    .filter(({ key }) => loaded.has(key))
    .flatMap(({ key }): Change[] => {
      const sharedErrors = document.sharedErrors.map((one) =>
        one.key === key ? { ...one, sd: 2 * one.sd } : one,
      );
      const measurements = document.measurements.map((one) => ({
        ...one,
        shared: one.shared.filter(({ error }) => error !== key),
      }));
      return [
        { kind: "shared-error-doubled", key, document: { ...document, sharedErrors } },
        { kind: "shared-error-absent", key, document: { ...document, measurements } },
      ];
    });
}

function otherWidths(document: CampaignDocument): Change[] {
  const tolerances = document.hypotheses.some(({ predictions }) =>
    predictions.some(({ tolerance }) => tolerance !== null),
  );
  const free = document.hypotheses.flatMap(({ key: hypothesis, parameters }) =>
    parameters
      .filter(({ prior }) => prior.family !== "fixed")
      .map(({ key: parameter }) => ({ hypothesis, parameter })),
  );
  const priors = free.flatMap((one): Change[] => {
    const key = `${one.hypothesis}/${one.parameter}`;
    return [
      { kind: "prior-halved", key, document: withPrior(document, one, 0.5) },
      { kind: "prior-doubled", key, document: withPrior(document, one, 2) },
    ];
  });
  const both: Change[] = [
    { kind: "tolerances-halved", key: null, document: withTolerances(document, 0.5) },
    { kind: "tolerances-doubled", key: null, document: withTolerances(document, 2) },
  ];
  return [
    ...(tolerances ? both : []),
    ...priors,
    { kind: "references-doubled", key: null, document: withReferences(document, 2) },
  ];
}

/** The independent uncertainties of disagreeing measurands times their Birge ratio. */
function inflatedDisagreements(document: CampaignDocument, standings: Standings): Change[] {
  const ratios = new Map<string, number>();
  for (const { code, at } of standings.warnings) {
    const place = /^\/measurands\/(\d+)$/.exec(at)?.[1];
    if (code !== "disagreeing-measurements" || place === undefined) continue;
    const { key } = document.measurands[Number(place)]!;
    const ratio = standings.measurands.find((one) => one.key === key)?.combined?.birgeRatio;
    if (ratio !== null && ratio !== undefined) ratios.set(key, ratio);
  }
  if (ratios.size === 0) return [];
  const measurements = document.measurements.map((one) => {
    const ratio = ratios.get(one.measurand);
    if (ratio === undefined) return one;
    const times = (width: number | null) => (width === null ? null : width * ratio);
    const { sd, sdDex, plus, minus } = one;
    return { ...one, sd: times(sd), sdDex: times(sdDex), plus: times(plus), minus: times(minus) };
  });
  return [{ kind: "disagreeing-inflated", key: null, document: { ...document, measurements } }];
}

function equalWeights(document: CampaignDocument): Change[] {
  const unequal = document.hypotheses.some(({ weight, group }) => weight !== 1 || group !== null);
  if (!unequal) return [];
  const hypotheses = document.hypotheses.map((one) => ({ ...one, weight: 1, group: null }));
  return [{ kind: "equal-weights", key: null, document: { ...document, hypotheses } }];
}
