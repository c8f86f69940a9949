import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import { evidencesOf } from "../evidences";
import { createState } from "../state";

/** Every hypothesis's ln evidence of a campaign with further measurements; null: impossible. */
export type EvidenceWith = (extra: readonly Measurement[]) => ReadonlyMap<string, number | null>;

/** What can't be scored with a further reading, as the engine's own problems. */
export class Unscorable extends Error {
  readonly problems: readonly Problem[];

  constructor(problems: readonly Problem[]) {
    super("a campaign with a further reading can't be scored");
    this.name = "Unscorable";
    this.problems = problems;
  }
}

/** @throws {Unscorable} from the function returned */
export function evidenceWith(document: CampaignDocument): EvidenceWith {
  return (extra) => {
    const measurements = [...document.measurements, ...extra];
    const state = createState({ ...document, measurements });
    if (!state.ok) throw new Unscorable(state.problems);
    return new Map(evidencesOf(state.value).map((one) => [one.hypothesis, one.lnEvidence]));
  };
}
