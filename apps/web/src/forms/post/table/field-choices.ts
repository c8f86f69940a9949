import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { ColumnMatch } from "@weighhouse/tables/table-match";

export interface FieldGroup {
  title: string;
  fields: { field: string; words: string }[];
}

const groups: { title: string; fields: Record<string, string> }[] = [
  {
    title: "Result",
    fields: {
      value: "value",
      sd: "uncertainty, one sd",
      sdDex: "uncertainty in dex",
      plus: "upper uncertainty",
      minus: "lower uncertainty",
      limit: "limit: < or >",
      upperLimit: "is an upper limit",
      lowerLimit: "is a lower limit",
      confidence: "confidence of a limit",
      sigmas: "sigmas of a limit",
      unit: "unit",
      occurred: "occurred: yes or no",
      efficiency: "efficiency",
      falseAlarm: "false-alarm chance",
      count: "count",
      exposure: "exposure",
      background: "background",
      noise: "noise",
    },
  },
  {
    title: "What and when",
    fields: {
      measurand: "quantity (measurand)",
      observable: "kind of quantity (observable)",
      observedAt: "observed at",
      date: "date, beside a time of day",
      timeOfDay: "time of day, beside a date",
      knownSince: "known since",
    },
  },
  {
    title: "Whose and where from",
    fields: {
      facility: "facility",
      team: "team",
      batch: "batch",
      id: "id",
      status: "status: final or provisional",
      source: "source",
      sameData: "same data as",
      shared: "shared errors",
      setAside: "set aside because",
    },
  },
];

const none: FieldGroup = {
  title: "No field",
  fields: [
    { field: "extra", words: "kept as extra" },
    { field: "ignore", words: "left out" },
  ],
};

/** Fields that each of several results in a line has for itself. */
const ofOne = ["value", "count", "occurred", "sd", "sdDex", "plus", "minus", "limit", "unit"];
const ofCounts = ["count", "exposure", "background"];
const ofEvents = ["occurred", "efficiency", "falseAlarm"];
const mostTargets = 20;

/**
 * What a column may be read as: a measurement's fields, the campaign's conditions, those of one
 * quantity where a line has several results, or nothing.
 */
export function fieldGroups(
  { observables, measurands }: Pick<CampaignDocument, "observables" | "measurands">,
  matched: string,
): FieldGroup[] {
  const conditions = new Map(
    observables.flatMap(({ conditions: declared }) =>
      declared.map(({ key, title }) => [`conditions.${key}`, title ?? key] as const),
    ),
  );
  const scales = new Set(observables.map(({ scale }) => scale));
  const unused = [
    ...(scales.has("count") ? [] : ofCounts),
    ...(scales.has("event") ? [] : ofEvents),
  ];
  const wordsOf = Object.assign({}, ...groups.map(({ fields }) => fields)) as Record<
    string,
    string
  >;
  const targets = [...measurands, ...observables];
  const all: FieldGroup[] = [
    ...groups.map(({ title, fields }) => ({
      title,
      fields: Object.entries(fields)
        .filter(([field]) => !unused.includes(field))
        .map(([field, words]) => ({ field, words })),
    })),
    {
      title: "Conditions",
      fields: [...conditions].map(([field, words]) => ({ field, words })),
    },
    ...(targets.length > mostTargets ? [] : targets).map(({ key, title }) => ({
      title: `Of ${title}, beside others in its line`,
      fields: ofOne
        .filter((field) => !unused.includes(field))
        .map((field) => ({ field: `${field}@${key}`, words: `${wordsOf[field]} of ${title}` })),
    })),
    none,
  ];
  const known = all.some(({ fields }) => fields.some(({ field }) => field === matched));
  const [role = "", key] = matched.split("@");
  const target = targets.find((each) => each.key === key);
  const words = target === undefined ? matched : `${wordsOf[role] ?? role} of ${target.title}`;
  const own = known ? [] : [{ title: "As it is", fields: [{ field: matched, words }] }];
  return [...own, ...all].filter(({ fields }) => fields.length > 0);
}

export function whyWords(why: ColumnMatch["why"], facility: string | null): string {
  switch (why) {
    case "name":
      return "by its name";
    case "synonym":
      return "by a usual name for it";
    case "ucd":
      return "by its UCD";
    case "unit":
      return "by its unit";
    case "remembered":
      return `remembered for ${facility ?? "the facility"}`;
    case "chosen":
      return "chosen here";
    case "none":
      return "no field of that name";
  }
}
