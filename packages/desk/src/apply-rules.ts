import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import type { Problem } from "@weighhouse/campaign/problem";
import { readCampaign } from "@weighhouse/campaign/read";
import { createState } from "@weighhouse/engine/state";
import { rowProblem } from "./judge-row";
import type { JudgedRow } from "./judge-row";

/**
 * The rules of the document and what the engine can score, for new rows beside the declarations
 * alone: what was posted before was judged before.
 *
 * Rows may come in any number of pieces, each of which costs what it holds: of the rows before it
 * only those are looked at again that could matter to a later one, which are few. They are, for
 * each measurand, the first reports of an event that rule out a truth; and for all of them together,
 * asked at the end, one row of each measurand, form and list of shared errors, since only these bring
 * unknowns of their own.
 */
export class RowRules {
  readonly #document: CampaignDocument;
  readonly #at: string;
  readonly #reports = new Map<string, Measurement>();
  readonly #loaded = new Map<string, Measurement>();
  #pieces = 0;

  constructor({ document, at }: { document: CampaignDocument; at: string }) {
    this.#document = { ...document, correlations: [] };
    this.#at = at;
  }

  /**
   * Refuses rows of a piece that break a rule.
   *
   * @returns what is wrong with the rows of the piece taken together
   */
  apply(fresh: JudgedRow[]): Problem[] {
    if (fresh.length === 0) return [];
    const before = [...this.#reports.values()];
    const measurements = fresh.map((row) => documentMeasurement(row.measurement!, this.#at));
    const problems: Problem[] = [];
    for (const problem of this.#problemsOf([...before, ...measurements])) {
      const [, index, within] = /^\/measurements\/(\d+)(.*)$/.exec(problem.pointer) ?? [];
      const row = fresh[Number(index) - before.length];
      // Who joins the rows finds what repeats an id, also across pieces.
      if (row && problem.code === "duplicate" && within === "/id") continue;
      if (!row) problems.push(problem);
      else {
        row.fate = "refused";
        row.problems = [...row.problems, rowProblem({ ...problem, pointer: within ?? "" })];
      }
    }
    this.#pieces += 1;
    for (const measurement of measurements) this.#remember(measurement);
    return problems;
  }

  /** What is wrong with all rows taken together, where one piece hadn't all of them. */
  finish(): Problem[] {
    if (this.#pieces < 2 || this.#loaded.size === 0) return [];
    return this.#together([...this.#loaded.values()]);
  }

  /** The same of rows that came in several parts: given those that have to be looked at together. */
  together(some: MeasurementContent[]): Problem[] {
    return this.#together(some.map((one) => documentMeasurement(one, this.#at)));
  }

  #together(some: Measurement[]): Problem[] {
    return this.#problemsOf(some).map((problem) => {
      const index = /^\/measurements\/(\d+)/.exec(problem.pointer)?.[1];
      const id = index === undefined ? undefined : some[Number(index)]?.id;
      return { ...problem, pointer: "", found: `${problem.found}${id ? ` (${id})` : ""}` };
    });
  }

  #problemsOf(measurements: Measurement[]): Problem[] {
    const read = readCampaign({ ...this.#document, measurements });
    const outcome = read.ok ? createState(read.value) : read;
    return outcome.ok ? [] : outcome.problems;
  }

  #remember(measurement: Measurement): void {
    const { measurand, occurred, efficiency, falseAlarm, setAside } = measurement;
    if (setAside !== null) return;
    if (occurred !== null) {
      const rulesOut = occurred ? 0 : 1;
      if (efficiency === rulesOut) first(this.#reports, `${measurand} yes`, measurement);
      if (falseAlarm === rulesOut) first(this.#reports, `${measurand} no`, measurement);
    }
    if (measurement.shared.length > 0) first(this.#loaded, loadingsOf(measurement), measurement);
  }
}

function first<T>(map: Map<string, T>, key: string, one: T): void {
  if (!map.has(key)) map.set(key, one);
}

/** What tells apart rows that may bring unknowns of their own. */
function loadingsOf({ measurand, shared, batch, limit, plus, noise }: Measurement): string {
  return JSON.stringify([measurand, shared, batch, limit, plus !== null, noise]);
}

/** As the document has it, once it is posted; field by field, for hundreds of thousands. */
export function documentMeasurement(one: MeasurementContent, postedAt: string): Measurement {
  return {
    id: one.id,
    measurand: one.measurand,
    facility: one.facility,
    team: one.team,
    batch: one.batch,
    observedAt: one.observedAt,
    postedAt,
    knownSince: one.knownSince,
    conditions: one.conditions,
    value: one.value,
    sd: one.sd,
    sdDex: one.sdDex,
    plus: one.plus,
    minus: one.minus,
    limit: one.limit,
    confidence: one.confidence,
    sigmas: one.sigmas,
    noise: one.noise,
    occurred: one.occurred,
    efficiency: one.efficiency,
    falseAlarm: one.falseAlarm,
    count: one.count,
    exposure: one.exposure,
    background: one.background,
    unit: one.unit,
    status: one.status,
    source: one.source,
    extra: one.extra,
    shared: one.shared,
    sameData: one.sameData,
    setAside: one.setAside,
  };
}
