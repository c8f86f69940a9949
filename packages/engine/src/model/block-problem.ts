import type { BlockProblem } from "../block/problem";
import type { Role } from "../frame";
import { seedOf } from "../seed";
import type { Workspace } from "../workspace";
import { Assembly } from "./assembly";
import type { BuiltBlock, Component, Part, Row } from "./block-parts";
import { correlationGroupsOf } from "./correlated-noise";
import { countFactor } from "./count-factor";
import { drawsOnFits, loadDraws } from "./draws";
import { expectNormal, expectPolynomial, expectUniform } from "./levels";
import { addFactoredSection } from "./factored-rows";
import { linearIn } from "./parameters";
import { eachRelativeVariance, expectPrediction } from "./predictions";
import { closedRows, openRows, setKind } from "./row-kinds";
import { centreOf } from "./rows";
import { fixedValue, loadsRelative, type Expected, type Section } from "./section";
import { levelKey } from "./shared-unknowns";

/** Builds one component's problem. Rows stay in the component's order. */
export function buildBlock(workspace: Workspace, component: Component): BuiltBlock {
  const { frame } = workspace;
  const { rows } = component;
  const assembly = new Assembly(frame, rows.length);
  const open = openRows(rows);
  const linear = linearParametersOf(workspace, component);
  const sections: Section[] = [];
  const counts: Part[] = [];
  let begin = 0;
  const addRows = (part: Part, own: Row[]) => {
    const { measurand } = part;
    const centre = centreOf(workspace, measurand);
    const frameOf = frame.measurands[measurand]!;
    sections.push({ assembly, open, part, begin, linear, centre, frame: frameOf, rows: own });
    begin += own.length;
  };
  for (const part of component.parts) {
    const own: Row[] = [];
    while (rows[begin + own.length]?.measurand === part.measurand)
      own.push(rows[begin + own.length]!);
    if (own.length === 0) counts.push(part);
    const factored = own.filter((row) => row.factored !== null);
    if (factored.length > 0) addRows(part, factored);
    if (factored.length < own.length) addRows(part, own.slice(factored.length));
  }
  const shared = drawsOnFits(
    sections.map(({ part, rows: own }) => ({
      polynomial: part.role.kind === "polynomial",
      rows: own,
    })),
  );
  // What other rows make of an unknown holds for a factor's rows too.
  for (const section of sections) if (!isFactored(section)) addSection(section, shared);
  for (const section of sections) if (isFactored(section)) addFactoredSection(section, shared);
  correlateTolerances(assembly, component.parts);
  const outerFactor = countFactor(workspace, assembly, { parts: counts, linear });
  open.groups = correlationGroupsOf(workspace, rows, open);
  const problem: BlockProblem = {
    rows: closedRows(open),
    linear: assembly.linear,
    outer: assembly.outer,
    correlations: assembly.correlations,
    scenarios: scenariosOf(workspace, component.parts),
    ...assembly.parts(),
    ...(outerFactor === null ? {} : { outerFactor }),
    seed: seedOf(frame.document.campaign.key),
  };
  return {
    problem,
    rows,
    parts: component.parts,
    placeOf: (key) => assembly.placeOf(key),
    isLinear: (key) => assembly.isLinear(key),
  };
}

function linearParametersOf({ frame }: Workspace, component: Component): Set<number> {
  const hypothesis = hypothesisOf(component.parts);
  if (hypothesis === null) return new Set();
  const scaled = new Set<number>();
  for (const { measurand, role } of component.parts) {
    const { scale } = frame.measurands[measurand]!;
    const rows = component.rows.filter((row) => row.measurand === measurand);
    if (scale === "cyclic" || scale === "count" || loadsRelative(rows) || isRelative(role)) {
      scaled.add(measurand);
    }
  }
  return linearIn(component, frame.hypotheses[hypothesis]!, {
    bars: (measurand) => scaled.has(measurand),
    scaleOf: (measurand) => frame.measurands[measurand]!.scale,
  });
}

function isRelative(role: Role): boolean {
  if (role.kind !== "predicted") return false;
  const { tolerance } = role.prediction;
  return tolerance.family === "normal" && tolerance.relative;
}

/** The hypothesis whose parameters these are; all of a block's are one's. */
function hypothesisOf(parts: readonly Part[]): number | null {
  for (const { role } of parts) if (role.kind === "predicted") return role.prediction.hypothesis;
  return null;
}

function addSection(section: Section, shared: ReadonlySet<number>): void {
  const { open, part, begin, rows, frame, centre } = section;
  const split =
    part.role.kind === "predicted" && part.role.prediction.tolerance.family === "splitNormal";
  rows.forEach((row, i) => {
    setKind(open, begin + i, { row, extra: row.extra, centre });
    // A split normal's offset comes after the circle is cut: it does that itself.
    open.period[begin + i] = split ? 0 : frame.period;
  });
  const expected = expectRole(section, part.role);
  if (part.role.kind === "predicted") {
    const { prediction } = part.role;
    rows.forEach((row, i) => {
      const own = eachRelativeVariance(prediction, expected, i);
      if (own > 0) setKind(open, begin + i, { row, extra: row.extra + own, centre });
    });
  }
  loadDraws(section, expected, shared);
}

function isFactored({ rows }: Section): boolean {
  return rows[0]!.factored !== null;
}

function expectRole(section: Section, role: Role): Expected {
  switch (role.kind) {
    case "normal":
      return expectNormal(section, role);
    case "uniform":
      return expectUniform(section, role);
    case "polynomial":
      return expectPolynomial(section, role);
    case "predicted":
      return expectPrediction(section, role.prediction);
    default:
      return fixedValue(section.rows.length, Number.NaN);
  }
}

function correlateTolerances(assembly: Assembly, parts: readonly Part[]): void {
  const hypothesis = hypothesisOf(parts);
  if (hypothesis === null) return;
  const { predictions, toleranceCorrelations } = assembly.frame.hypotheses[hypothesis]!;
  for (const { a, b, coefficient } of toleranceCorrelations) {
    const first = assembly.placeOf(levelKey(predictions[a]!.measurand));
    const second = assembly.placeOf(levelKey(predictions[b]!.measurand));
    if (first === undefined || second === undefined) continue;
    const spoken = [a, b].every((one) =>
      parts.some(({ role }) => role.kind === "predicted" && role.prediction === predictions[one]),
    );
    if (spoken) assembly.correlations.push({ first, second, value: coefficient });
  }
}

/** ln weights of the rows of the ensemble, where something in the block hangs on it. */
function scenariosOf({ frame }: Workspace, parts: readonly Part[]): Float64Array {
  for (const { role } of parts) {
    if (role.kind !== "predicted" || role.prediction.expectation === null) continue;
    const { parameters, ensemble } = frame.hypotheses[role.prediction.hypothesis]!;
    if (ensemble === null) continue;
    const columns = parameters.length + ensemble.columns.length;
    const uses = role.prediction.expectation.uses.some(
      (slot) => slot >= parameters.length && slot < columns,
    );
    if (uses) return ensemble.logWeights;
  }
  return new Float64Array(1);
}
