import type { Open } from "./documents";
import { asymmetric, correlated, derivedValues, sharedErrors } from "./forms/couplings";
import { course } from "./forms/course";
import { levelCurves, polynomialCurves, smoothCurves } from "./forms/curves";
import type { Explanation, Form } from "./forms/form";
import { manyParameters, priors, tablesAndEnsembles, tolerances } from "./forms/models";
import { counts, events } from "./forms/reports";
import { cyclic, limits, logarithmic, magnitude } from "./forms/scales";

const forms = {
  events,
  counts,
  cyclic,
  magnitude,
  limits,
  logarithmic,
  asymmetric,
  sharedErrors,
  correlated,
  derivedValues,
  polynomialCurves,
  smoothCurves,
  levelCurves,
  tolerances,
  priors,
  tablesAndEnsembles,
  manyParameters,
  course,
};

export type FormName = keyof typeof forms | "whole";

/**
 * Valid campaign documents, as JSON values, that together have every form of the format: one for each
 * part of an invented campaign about a bridge that hums, and `whole`, which holds all parts at once.
 * Two hypotheses, `vortex` and `cable`, predict in each. The caller may change them.
 */
export function everyForm(): Record<FormName, Open> {
  const parts = Object.entries(forms).map(([name, form]) => [name, documentOf(name, [form])]);
  const whole = documentOf("whole", Object.values(forms));
  return structuredClone({ ...Object.fromEntries(parts), whole });
}

function documentOf(name: string, given: Form[]): Open {
  const all = (list: keyof Form) => given.flatMap((form) => form[list] ?? []);
  return {
    format: "weighhouse-campaign/1",
    campaign: {
      key: `humming-bridge-${name.toLowerCase()}`,
      title: "Why the bridge hums",
      summary: "An invented campaign.",
      registrationCloses: "2034-05-22T00:00:00Z",
      noneOfThese: { weight: 0.5 },
    },
    observables: all("observables"),
    measurands: all("measurands"),
    derived: all("derived"),
    sharedErrors: all("sharedErrors"),
    facilities: [{ key: "quay", title: "The quay" }, { key: "hill" }],
    teams: [{ key: "listeners", title: "The listeners" }, { key: "riggers" }],
    hypotheses: [
      {
        key: "vortex",
        title: "Vortices behind the railing",
        statement: "The railing sheds vortices at a pitch that goes with the wind.",
        team: "listeners",
        group: "wind",
        registeredAt: "2034-02-10T09:00:00Z",
        ...merged(given.map(({ vortex }) => vortex)),
      },
      {
        key: "cable",
        title: "A cable that answers to traffic",
        team: "riggers",
        weight: 2,
        registeredAt: "2034-02-11T09:00:00Z",
        ...merged(given.map(({ cable }) => cable)),
      },
    ],
    measurements: all("measurements"),
    correlations: all("correlations"),
  };
}

/** One explanation of all the parts, which name nothing alike; one of them has an ensemble. */
function merged(given: Explanation[]): Open {
  const all = (list: Exclude<keyof Explanation, "ensemble">) =>
    given.flatMap((one): Open[] => one[list] ?? []);
  return {
    withheld: all("withheld"),
    parameters: all("parameters"),
    tables: all("tables"),
    ensemble: given.find(({ ensemble }) => ensemble !== undefined)?.ensemble ?? null,
    predictions: all("predictions"),
    toleranceCorrelations: all("toleranceCorrelations"),
  };
}
