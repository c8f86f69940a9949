import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings, Warning } from "@weighhouse/campaign/standings";
import { hypothesisPlace, warnedPlaces, type Place } from "./warned-place";

/** A stretch of a warning's sentence; with `path`, the title of what the page at it shows. */
export type WarningWord = { text: string; path?: string };

/**
 * The engine's sentence with titles where it names its quantities and hypotheses by key. A key that
 * stands in the sentence more than once may be a word of it too: then it stays a key. A sentence
 * that has no title in it is followed by that of what it is about.
 */
export function warningWords(
  warning: Warning,
  document: CampaignDocument,
  pairs: Standings["pairs"],
): WarningWord[] {
  const places = placesOf(warning.at, document, pairs);
  const words = places.reduce<WarningWord[]>(titled, [
    { text: warning.text.replaceAll("log10", "log₁₀").replaceAll(/(?<= )-(?=\d)/g, "−") },
  ]);
  const [first] = places;
  return first === undefined || words.some(({ path }) => path !== undefined)
    ? words
    : [...words, { text: " " }, { text: first.title, path: first.path }];
}

function placesOf(at: string, document: CampaignDocument, pairs: Standings["pairs"]): Place[] {
  const pair = pairs[Number(/^\/pairs\/(\d+)/.exec(at)?.[1])];
  return pair
    ? [hypothesisPlace(document, pair.a), hypothesisPlace(document, pair.b)].filter(
        (place) => place !== null,
      )
    : warnedPlaces(at, document);
}

function titled(words: WarningWord[], place: Place): WarningWord[] {
  const key = new RegExp(`(?<![\\w-])${place.key.replaceAll(/[^\w-]/g, "\\$&")}(?![\\w-])`);
  const found = words.filter((word) => word.path === undefined && key.test(word.text));
  return words.flatMap((word) => {
    if (word !== found[0]) return [word];
    const [before = "", after = "", ...more] = word.text.split(key);
    if (found.length > 1 || more.length > 0) return [word];
    return [{ text: before }, { text: place.title, path: place.path }, { text: after }].filter(
      ({ text }) => text !== "",
    );
  });
}
