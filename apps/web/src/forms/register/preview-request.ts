import { numberFromText } from "../entered-text";
import type { PredictionDraft } from "./hypothesis-draft";
import { referenceMiddle, type Quantity } from "./quantity";
import type { PreviewRequest } from "./use-preview";

/** What to ask the engine about a drafted prediction; null while something is missing. */
export function requestOfDraft(
  draft: PredictionDraft,
  fallbackSd: number | null,
): PreviewRequest | null {
  const expected = numberFromText(draft.expected);
  const measuredSd = sdOf(draft, fallbackSd);
  if (draft.says !== "number" || expected === null || measuredSd === null) return null;
  if (draft.tolerance === "exact")
    return {
      prediction: { measurand: draft.measurand, expected, tolerance: null },
      sd: measuredSd,
    };
  const sd = numberFromText(draft.sd);
  if (typeof sd !== "number" || !(sd > 0)) return null;
  return {
    prediction: {
      measurand: draft.measurand,
      expected,
      tolerance: {
        family: "normal",
        sd,
        relative: false,
        sharing: draft.sharing,
        in: null,
        length: null,
      },
    },
    sd: measuredSd,
  };
}

/**
 * What silence forgoes: an exact prediction in the middle of the no-model range that hits. The
 * silent are charged the no-model range, so what such a hit earns is the lead over them.
 */
export function requestOfRival(
  quantity: Quantity,
  draft: PredictionDraft,
  fallbackSd: number | null,
): PreviewRequest | null {
  const expected = referenceMiddle(quantity);
  const sd = sdOf(draft, fallbackSd);
  if (expected === null || sd === null) return null;
  return { prediction: { measurand: draft.measurand, expected, tolerance: null }, sd };
}

function sdOf(draft: PredictionDraft, fallback: number | null): number | null {
  const typed = numberFromText(draft.supposedSd);
  if (typed === null) return fallback;
  return typeof typed === "number" && typed > 0 ? typed : null;
}
