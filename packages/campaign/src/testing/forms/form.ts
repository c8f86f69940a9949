import type { Open } from "../documents";

/** The two explanations of why the bridge hums that every part of the invented campaign tests. */
export type Explanation = {
  parameters?: Open[];
  tables?: Open[];
  ensemble?: Open;
  withheld?: string[];
  predictions?: Open[];
  toleranceCorrelations?: Open[];
};

/** What one part of the invented campaign declares, predicts and measures. */
export type Form = {
  observables: Open[];
  measurands: Open[];
  derived?: Open[];
  sharedErrors?: Open[];
  /** Vortices behind the railing. */
  vortex: Explanation;
  /** A cable that answers to traffic. */
  cable: Explanation;
  measurements: Open[];
  correlations?: Open[];
};

export const SPRING = { from: "2034-03-01T00:00:00Z", to: "2034-06-01T00:00:00Z" };
