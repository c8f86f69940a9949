import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { hex, utf8 } from "@weighhouse/ledger/bytes";
import { MAX_PAYLOAD_BYTES, payloadText } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";

/**
 * The canonical text (RFC 8785) of a measurement of a payload, parted where its `postedAt` stands in
 * the projection: the payload has `head + tail`, the projection's row `postedText`.
 */
export type ContentText = { head: string; tail: string };

export function postedText({ head, tail }: ContentText, postedAt: string): string {
  return `${head}"postedAt":${JSON.stringify(postedAt)},${tail}`;
}

/**
 * Written for hundreds of thousands: the members in their order, by JSON.stringify, which writes
 * numbers and strings as RFC 8785 does. Where that may not be so (members of the user's naming, an
 * escape that may stand for what no payload can hold) the careful serialiser decides.
 *
 * @throws {LedgerError} `not-json` with a pointer to the field; `payload-too-large` for a
 *   measurement that no payload can hold
 */
export function contentText(content: MeasurementContent): ContentText {
  const { beforeId, afterId, tail } = membersOf(content);
  return checked(content, {
    head: `${beforeId},"id":${JSON.stringify(content.id)},${afterId},`,
    tail,
  });
}

/**
 * The id of a measurement that was posted without one: `<facility>:<observedAt>:<12 hex digits>` of
 * the SHA-256 of its canonical form without the id; what it doesn't have is left out.
 *
 * @throws {LedgerError} as `contentText`
 */
export function defaultId(content: MeasurementContent): string {
  const { beforeId, afterId, tail } = membersOf(content);
  const text = checked(content, { head: `${beforeId},${afterId},`, tail });
  const digest = hex(nodeHasher(utf8(text.head + text.tail))).slice(0, 12);
  return [content.facility, content.observedAt, digest].filter((each) => each !== null).join(":");
}

/** Letters of which not even three bytes each fill a payload. */
const SURELY_SHORT = MAX_PAYLOAD_BYTES / 3 - 1000;

function checked(content: MeasurementContent, text: ContentText): ContentText {
  if (text.head.includes("\\u") || text.tail.includes("\\u")) canonicalJson(content);
  if (text.head.length + text.tail.length > SURELY_SHORT) {
    payloadText({ measurements: [content], correlations: [] });
  }
  return text;
}

/** The members in canonical order, a closing brace behind the last. */
function membersOf(content: MeasurementContent) {
  const beforeId = JSON.stringify({
    background: content.background,
    batch: content.batch,
    claimed: content.claimed,
    conditions: sorted(content.conditions),
    confidence: content.confidence,
    count: content.count,
    efficiency: content.efficiency,
    exposure: content.exposure,
  });
  const extra = isEmpty(content.extra) ? "{}" : canonicalJson(content.extra);
  const afterId = JSON.stringify({
    knownSince: content.knownSince,
    limit: content.limit,
    measurand: content.measurand,
    minus: content.minus,
    noise: content.noise,
    observedAt: content.observedAt,
    occurred: content.occurred,
    plus: content.plus,
  });
  const tail = JSON.stringify({
    sameData: content.sameData,
    sd: content.sd,
    sdDex: content.sdDex,
    setAside: content.setAside,
    shared: content.shared.length === 0 ? content.shared : content.shared.map(loading),
    sigmas: content.sigmas,
    source: content.source,
    status: content.status,
    team: content.team,
    unit: content.unit,
    value: content.value,
  });
  const { facility, falseAlarm } = content;
  return {
    beforeId: `${beforeId.slice(0, -1)},"extra":${extra},"facility":${JSON.stringify(facility)},"falseAlarm":${JSON.stringify(falseAlarm)}`,
    afterId: afterId.slice(1, -1),
    tail: tail.slice(1),
  };
}

const loading = ({ error, coefficient }: MeasurementContent["shared"][number]) => ({
  coefficient,
  error,
});

/** Conditions' names begin with a letter, so that an object keeps them in the order given. */
function sorted(conditions: Record<string, number>): Record<string, number> {
  const names = Object.keys(conditions);
  if (names.length < 2) return conditions;
  return Object.fromEntries(names.sort().map((name) => [name, conditions[name]!]));
}

function isEmpty(object: object): boolean {
  for (const _ in object) return false;
  return true;
}
