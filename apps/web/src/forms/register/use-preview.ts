"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type {
  PredictionDraft as EngineDraft,
  PredictionPreview,
} from "@weighhouse/engine/prediction-preview";
import { useEffect, useState } from "react";
import { problemWords } from "../form-schema";

export type PreviewState =
  | { state: "waiting" }
  | { state: "ready"; preview: PredictionPreview }
  | { state: "refused"; words: string };

export interface PreviewRequest {
  prediction: EngineDraft;
  sd: number;
}

const waiting: PreviewState = { state: "waiting" };
const settleMs = 120;

/**
 * What the engine makes of a prediction while it is typed, computed here in the browser. The
 * engine is fetched with the first request, so that the page stands before it. One preview takes
 * less than a millisecond: a worker would cost more than it spares.
 *
 * @param request null where the form holds nothing to compute from
 */
export function usePreview(
  document: CampaignDocument,
  request: PreviewRequest | null,
): PreviewState {
  const [answer, setAnswer] = useState<PreviewState>(waiting);
  const asked = request === null ? null : JSON.stringify(request);
  useEffect(() => {
    if (asked === null) return undefined;
    let wanted = true;
    const ask = async () => {
      const next = await previewOf(document, JSON.parse(asked) as PreviewRequest);
      if (wanted) setAnswer(next);
    };
    const timer = setTimeout(() => void ask(), settleMs);
    return () => {
      wanted = false;
      clearTimeout(timer);
    };
  }, [document, asked]);
  // The last answer stands until the next one is there, so that nothing flickers while typing.
  return asked === null ? waiting : answer;
}

export async function previewOf(
  document: CampaignDocument,
  { prediction, sd }: PreviewRequest,
): Promise<PreviewState> {
  try {
    const { previewPrediction } = await import("@weighhouse/engine/prediction-preview");
    const result = previewPrediction(document, prediction, { sd });
    if (result.ok) return { state: "ready", preview: result.value };
    return { state: "refused", words: result.problems.map(problemWords).join(" ") };
  } catch {
    return { state: "refused", words: "The preview could not be fetched; the form works without." };
  }
}
