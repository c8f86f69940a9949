import { completeDocument } from "./complete";
import { campaignDocumentSchema } from "./document";
import type { CampaignDocument, DocumentForm } from "./document";
import { DocumentText, divideText } from "./document-text";
import type { DividedText } from "./document-text";
import { readForm } from "./form";
import type { Legible } from "./form";
import { parseJson } from "./json-text";
import { quickMeasurement } from "./quick-measurement";
import type { Problem, Result } from "./problem";
import { measurementSchema } from "./measurement";
import { below } from "./pointer";
import { checkCorrelations } from "./rules/correlations";
import { checkDeclarations } from "./rules/declarations";
import { checkHypotheses } from "./rules/hypotheses";
import { checkMeasurands } from "./rules/measurands";
import { checkMeasurements } from "./rules/measurements";
import { Reading } from "./rules/reading";

/**
 * Reads a campaign document: its form, and everything that must fit together and can be told
 * without scoring. Either the whole document with every default, or all problems at once, in the
 * document's order of parts.
 *
 * @param value what JSON.parse gave; it is left as it is
 */
export function readCampaign(value: unknown): Result<CampaignDocument> {
  const problems: Problem[] = [];
  return readRules(formOf(value, problems), problems);
}

function readRules(
  form: Legible<DocumentForm> | undefined,
  problems: Problem[],
): Result<CampaignDocument> {
  if (form === undefined) return { ok: false, problems };
  checkRules(new Reading(form, problems));
  if (problems.length > 0) return { ok: false, problems };
  // Without a problem every part was legible.
  return { ok: true, value: completeDocument(form as DocumentForm) };
}

/** As `readCampaign`, from JSON text: syntax errors and members that stand twice are told too. */
export function readCampaignText(text: string): Result<CampaignDocument> {
  const divided = divideText(text);
  if (divided !== null) return readDivided(divided);
  const parsed = parseJson(text);
  if (parsed.problems.length === 0) return readCampaign(parsed.value);
  if (parsed.value === undefined) return { ok: false, problems: parsed.problems };
  const read = readCampaign(parsed.value);
  return { ok: false, problems: [...parsed.problems, ...(read.ok ? [] : read.problems)] };
}

/**
 * As `readCampaignText`, of a text that comes in pieces, and with room for its parts alone: of a long
 * list of measurements the text is several times as large as what is read of it.
 *
 * @param pieces the text, cut anywhere
 * @returns null where the text has a fault, or isn't as plain as it could be: then read it as a whole
 */
export function readCampaignPieces(pieces: Iterable<string>): Result<CampaignDocument> | null {
  const text = new DocumentText();
  for (const piece of pieces) text.push(piece);
  const divided = text.end();
  return divided === null ? null : readDivided(divided);
}

function readDivided({
  rest,
  measurements,
  problems: ofMeasurements,
}: DividedText): Result<CampaignDocument> {
  const problems: Problem[] = [];
  const form = take(readForm(campaignDocumentSchema, rest, ""), problems);
  for (const problem of ofMeasurements) problems.push(problem);
  return readRules(form === undefined ? undefined : { ...form, measurements }, problems);
}

function checkRules(reading: Reading): void {
  checkDeclarations(reading);
  checkMeasurands(reading);
  checkHypotheses(reading);
  checkMeasurements(reading);
  checkCorrelations(reading);
}

/** Long lists of measurements pass a quick check; only what fails it is read for its words. */
function formOf(value: unknown, problems: Problem[]): Legible<DocumentForm> | undefined {
  const measurements = measurementsIn(value);
  if (measurements === null) return take(readForm(campaignDocumentSchema, value, ""), problems);
  const rest = { ...(value as object), measurements: [] };
  const form = take(readForm(campaignDocumentSchema, rest, ""), problems);
  if (form === undefined) return undefined;
  const read = measurements.map(
    (one, index) =>
      quickMeasurement(one) ??
      take(readForm(measurementSchema, one, below("/measurements", index)), problems),
  );
  return { ...form, measurements: read };
}

function measurementsIn(value: unknown): unknown[] | null {
  if (typeof value !== "object" || value === null || !Object.hasOwn(value, "measurements")) {
    return null;
  }
  const { measurements } = value as { measurements: unknown };
  return Array.isArray(measurements) ? measurements : null;
}

function take<T>(
  form: { value: T | undefined; problems: Problem[] },
  problems: Problem[],
): T | undefined {
  for (const problem of form.problems) problems.push(problem);
  return form.value;
}
