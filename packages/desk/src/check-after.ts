import { CampaignError } from "@weighhouse/campaign/campaign-error";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Part } from "@weighhouse/campaign/parts";
import type { Problem } from "@weighhouse/campaign/problem";
import { readCampaign } from "@weighhouse/campaign/read";
import { scoreCampaign } from "@weighhouse/engine/score";
import { invalid } from "./desk-error";
import { documentAfter } from "./document-after";
import type { ListName, Moment, NewEntry } from "./document-after";

/** A part of the document that a field of the input becomes: problems there point at the field. */
export type Field = { list: ListName; key: string; pointer: string };

/**
 * Refuses entries that break a rule of the ledger, and those after which the campaign document would
 * no longer read, or no longer be one that the engine scores: what is in a ledger stays, so it must
 * not break its campaign.
 *
 * @returns the document as it would be
 * @throws {DeskError} `invalid`, with problems that point at the input's fields
 */
export function checkAfter(
  before: Iterable<Part>,
  entries: NewEntry[],
  made: Moment & { fields: Field[]; pointer?: string | undefined },
): CampaignDocument {
  const after = keepingRules(made.pointer ?? made.fields[0]?.pointer ?? "", () =>
    documentAfter(before, entries, made),
  );
  const read = readCampaign(after);
  if (!read.ok) throw invalid(atFields(read.problems, after, made.fields));
  const scored = scoreCampaign(after);
  if (!scored.ok) throw invalid(atFields(scored.problems, after, made.fields));
  return after;
}

/** A rule's fault lies in the payload, and the payload is what a field of the input became. */
function keepingRules<T>(pointer: string, apply: () => T): T {
  try {
    return apply();
  } catch (error) {
    if (!(error instanceof CampaignError) || error.problem === null) throw error;
    throw invalid([{ ...error.problem, pointer: pointer + error.problem.pointer }]);
  }
}

/** Problems of a document, those within a field's part pointing at that field. */
export function atFields(
  problems: Problem[],
  document: CampaignDocument,
  fields: Field[],
): Problem[] {
  const places = fields.map(({ list, key, pointer }) => ({
    from: `/${list}/${indexIn(document, list, key)}`,
    to: pointer,
  }));
  return problems.map((problem) => {
    const place = places.find(
      ({ from }) => problem.pointer === from || problem.pointer.startsWith(`${from}/`),
    );
    if (place) return { ...problem, pointer: place.to + problem.pointer.slice(place.from.length) };
    const found = `${problem.found} (in the campaign, at ${problem.pointer})`;
    return { ...problem, pointer: fields[0]?.pointer ?? "", found };
  });
}

function indexIn(document: CampaignDocument, list: ListName, key: string): number {
  return document[list].findIndex(
    (part) => ("id" in part ? part.id : "key" in part && part.key) === key,
  );
}
