/** The parts that a campaign document is made of. */
export const documentParts = [
  "campaign",
  "observable",
  "measurand",
  "derived",
  "sharedError",
  "facility",
  "team",
  "hypothesis",
  "measurement",
  "correlation",
] as const;
export type DocumentPart = (typeof documentParts)[number];

/** What a ledger holds beside its document: shown with it, and never scored. */
export const recordParts = [
  "proposal",
  "objection",
  "seal",
  "remark",
  "citation",
  "restore",
] as const;

export const partNames = [...documentParts, ...recordParts] as const;
export type PartName = (typeof partNames)[number];

/** There is one campaign in a document, so its part needs no key of its own. */
export const CAMPAIGN_PART = "campaign";

/**
 * What a part holds, as JSON: its fields in the document, and what only the ledger knows of it
 * (claimed dates, its withdrawal, what of it is sealed).
 */
export type PartContent = Record<string, unknown>;

/** A part as the fold leaves it: what the projections hold a row of. */
export type Part = { part: PartName; key: string; content: PartContent };

/** The parts as they are before an entry. */
export interface PartsBefore {
  get(part: PartName, key: string): PartContent | null;
  /** All of one kind, in the order of their first put. */
  all(part: PartName): Iterable<Part>;
  /** The measurements that a facility made, withdrawn ones too. */
  measurementsOf(facility: string): Iterable<Part>;
}

/** The parts in memory. */
export class Parts implements PartsBefore {
  readonly #contents = new Map<PartName, Map<string, PartContent>>(
    partNames.map((part) => [part, new Map<string, PartContent>()]),
  );

  constructor(parts: Iterable<Part> = []) {
    for (const part of parts) this.put(part);
  }

  put({ part, key, content }: Part): void {
    this.#contents.get(part)!.set(key, content);
  }

  get(part: PartName, key: string): PartContent | null {
    return this.#contents.get(part)!.get(key) ?? null;
  }

  *all(part: PartName): Generator<Part> {
    for (const [key, content] of this.#contents.get(part)!) yield { part, key, content };
  }

  *measurementsOf(facility: string): Generator<Part> {
    for (const one of this.all("measurement")) {
      if (one.content["facility"] === facility) yield one;
    }
  }

  /** Every part in the order of its first put. */
  *everything(): Generator<Part> {
    for (const part of partNames) yield* this.all(part);
  }
}
