import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { canonicalBytes, canonicalJson } from "@weighhouse/ledger/canonical";
import { hex } from "@weighhouse/ledger/bytes";
import type { Entry } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { keepHead, writeEntries } from "./append";
import type { Appended, Clock } from "./append";
import { findCampaign } from "./campaigns";
import { lockTip } from "./lock-tip";
import type { Store } from "./open-store";
import { splitPosting } from "./split-posting";
import type { Correlation } from "./split-posting";
import { preparePayload } from "./prepare-payload";
import type { Queries } from "./queries";
import { StoreError } from "./store-error";

export type PostMeasurementsInput = {
  campaign: string;
  by: Entry["by"];
  /** As in the payload of `measurements.posted`; an `id` may be absent. */
  measurements: Record<string, unknown>[];
  correlations?: Correlation[];
  clock?: Clock | undefined;
};

export type Conflict = { id: string; field: string; there: unknown; posted: unknown };

export type Posted = {
  posted: string[];
  alreadyThere: string[];
  /** If there is any, nothing was posted. */
  conflicts: Conflict[];
  appended: Appended | null;
};

type Content = Record<string, unknown>;

/**
 * Posts measurements idempotently, as many entries of one transaction as they need: an id that is
 * there with the same content changes nothing, with other content it is a conflict, and a conflict
 * anywhere posts nothing at all. Looked up under the campaign's lock.
 *
 * @throws {StoreError} `invalid-payload`, with pointers into `{ measurements, correlations }`
 */
export async function postMeasurements(
  store: Store,
  input: PostMeasurementsInput,
): Promise<Posted> {
  const given = input.measurements.map(withId);
  const payloads = splitPosting(given, input.correlations ?? []);
  const contents = payloads.flatMap(({ value }) => value.measurements);
  const correlations = payloads.flatMap(({ value }) => value.correlations);
  const outcome = (await store.sql.begin(async (tx) => {
    const tip = await lockTip(tx, input.campaign);
    const sorted = sortOut(
      [...contents.map(asItem), ...correlations.map(asPairItem)],
      await contentsThere(tx, tip.campaignId, contents, correlations),
    );
    const outcome = { posted: [], alreadyThere: sorted.alreadyThere, conflicts: sorted.conflicts };
    if (sorted.conflicts.length > 0) return { ...outcome, appended: null };
    const fresh = contents.filter((content) => sorted.fresh.delete(content.id));
    const pairs = correlations.filter((pair) => sorted.fresh.delete(pairKey(pair)));
    if (fresh.length === 0 && pairs.length === 0) return { ...outcome, appended: null };
    const unchanged = fresh.length === contents.length && pairs.length === correlations.length;
    const appended = await writeEntries(store, tx, {
      tip,
      by: input.by,
      payloads: unchanged ? payloads : splitPosting(fresh, pairs),
      clock: input.clock,
    });
    return { ...outcome, posted: fresh.map(({ id }) => id), appended };
  })) as Posted;
  if (outcome.appended !== null) await keepHead(store, outcome.appended.note);
  return outcome;
}

/**
 * What posting these measurements would find, as of now: ids that are there with the same content,
 * and what differs of those with another. Changes nothing.
 */
export async function comparePosting(
  store: Store,
  input: { campaign: string; measurements: MeasurementContent[] },
): Promise<{ alreadyThere: string[]; conflicts: Conflict[] }> {
  const { id } = await findCampaign(store, input.campaign);
  const there = await contentsThere(store.sql, id, input.measurements, []);
  const { alreadyThere, conflicts } = sortOut(input.measurements.map(asItem), there);
  return { alreadyThere, conflicts };
}

/**
 * The id of a measurement that was posted without one: `<facility>:<observedAt>:<12 hex digits>` of
 * the SHA-256 of its canonical form with defaults written out; what it doesn't have is left out.
 */
export function defaultMeasurementId(measurement: Content): string {
  const { value } = preparePayload({
    kind: "measurements.posted",
    payload: { measurements: [{ ...measurement, id: "-" }] },
  });
  const [content] = (value as { measurements: MeasurementContent[] }).measurements;
  const { id: _, ...rest } = content as MeasurementContent;
  const digest = hex(nodeHasher(canonicalBytes(rest))).slice(0, 12);
  return [rest.facility, rest.observedAt, digest].filter((each) => each !== null).join(":");
}

function withId(measurement: Content, index: number): Content {
  if (measurement["id"] !== undefined && measurement["id"] !== null) return measurement;
  try {
    return { ...measurement, id: defaultMeasurementId(measurement) };
  } catch (error) {
    if (!(error instanceof StoreError)) throw error;
    const problems = error.problems.map((problem) => ({
      ...problem,
      pointer: problem.pointer.replace(/^\/measurements\/0/, `/measurements/${index}`),
    }));
    throw new StoreError(error.code, error.message, { cause: error, problems });
  }
}

type Item = { id: string; content: Content };
const asItem = (content: MeasurementContent): Item => ({ id: content.id, content });
const asPairItem = (pair: Correlation): Item => ({ id: pairKey(pair), content: pair });
const pairKey = ({ a, b }: Correlation) => `${a} ${b}`;

/** Every version of what was posted under these ids, the newest first. */
async function contentsThere(
  tx: Queries,
  campaignId: number,
  contents: MeasurementContent[],
  correlations: Correlation[],
): Promise<Map<string, Content[]>> {
  const [measurements, pairs] = await Promise.all([
    tx<{ id: string; content: string }[]>`
      select id, content from measurements
      where campaign_id = ${campaignId} and id = any(${contents.map(({ id }) => id)}::text[])
      order by id, from_size desc`,
    correlations.length === 0
      ? []
      : tx<{ id: string; content: string }[]>`
          select key as id, content from parts
          where campaign_id = ${campaignId} and part = 'correlation'
            and key = any(${correlations.map(pairKey)}::text[])
          order by key, from_size desc`,
  ]);
  const there = new Map<string, Content[]>();
  for (const row of [...measurements, ...pairs]) {
    const versions = there.get(row.id);
    const content = JSON.parse(row.content) as Content;
    if (versions === undefined) there.set(row.id, [content]);
    else versions.push(content);
  }
  return there;
}

/**
 * Parts what is posted into new, already there (also twice in one posting), and conflicting. A table
 * posted again is already there also where it was corrected since, or holds the correction.
 */
function sortOut(items: Item[], there: Map<string, Content[]>) {
  const fresh = new Set<string>();
  const alreadyThere: string[] = [];
  const conflicts: Conflict[] = [];
  for (const { id, content } of items) {
    const [newest, ...older] = there.get(id) ?? [];
    if (newest === undefined) {
      fresh.add(id);
      there.set(id, [content]);
      continue;
    }
    const differing = differingFields(content, newest);
    if ([differing, ...older.map((one) => differingFields(content, one))].some(isEmpty)) {
      alreadyThere.push(id);
      continue;
    }
    for (const field of differing) {
      conflicts.push({ id, field, there: newest[field] ?? null, posted: content[field] });
    }
  }
  return { fresh, alreadyThere, conflicts };
}

export function differingFields(content: Content, there: Content): string[] {
  return Object.keys(content).filter(
    (field) => canonicalJson(content[field]) !== canonicalJson(there[field] ?? null),
  );
}

function isEmpty(fields: string[]): boolean {
  return fields.length === 0;
}
