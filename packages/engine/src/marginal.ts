import { addRow, createSystem } from "@weighhouse/numerics/triangular-system";
import { batchKinds, type BatchKind, type BatchKinds } from "./batch-kinds";
import { addProfiles, profileOf, type Profile } from "./batch-profiles";
import { addBatch, addGroup, type Row } from "./batch-rows";
import type { Marginal, Part } from "./marginal-form";
import type { Sums } from "./sums";

/** The sums with what has been worked out of them; good until a reading is added. */
export interface Marginals {
  sums: Sums;
  kinds: BatchKinds;
  locals: Map<string, Marginal>;
  profiles: Map<string, Profile>;
}

export function createMarginals(sums: Sums): Marginals {
  return { sums, kinds: batchKinds(sums), locals: new Map(), profiles: new Map() };
}

/**
 * @param parts the measurands, each once
 * @param kept draws per batch that stay unknowns of the result; all others are integrated out
 */
export function marginalOf(
  marginals: Marginals,
  parts: readonly Part[],
  kept: ReadonlySet<number> = new Set(),
): Marginal {
  const { sums, kinds } = marginals;
  const locals = parts.map((part) => localOf(marginals, part));
  // Kept draws must not be summed away: their batches are rotated, few as they are.
  const rotated = rotatedRows(
    marginals,
    parts,
    kept.size > 0 ? ["summed", "rotated"] : ["rotated"],
  );
  const profiles = kept.size > 0 ? [] : parts.map((part) => profileFor(marginals, part));
  const drawn = new Set(kept);
  for (const { draws } of locals) for (const draw of draws) drawn.add(draw);
  for (const { open } of profiles) for (const draw of open) drawn.add(draw);
  for (const { pattern } of rotated.flat()) {
    for (const draw of pattern.draws) if (sums.draws[draw]!.batch === null) drawn.add(draw);
  }
  const draws = [...drawn].sort((a, b) => a - b);
  const columns = new Map(draws.map((draw, i) => [draw, parts.length + i]));
  const system = createSystem(parts.length + draws.length);
  const marginal: Marginal = { system, draws, logNorm: 0, squares: 0 };
  locals.forEach((local, level) => addLocal(marginal, local, { level, columns }));
  addProfiles(marginal, profiles, { kinds, columns });
  for (const rows of rotated) addBatch(marginal, rows, columns);
  return marginal;
}

function profileFor({ sums, kinds, profiles }: Marginals, part: Part): Profile {
  const key = `${part.measurand}/${part.noise}`;
  const there = profiles.get(key);
  if (there !== undefined) return there;
  const profile = profileOf(sums, kinds, part);
  profiles.set(key, profile);
  return profile;
}

/** The parts' rows in batches of these kinds, by batch. */
function rotatedRows(
  { sums, kinds }: Marginals,
  parts: readonly Part[],
  wanted: readonly BatchKind[],
): Row[][] {
  const batches = new Map<number, Row[]>();
  if (!kinds.kinds.some((kind) => wanted.includes(kind))) return [];
  parts.forEach(({ measurand, noise }, level) => {
    const own = sums.measurands[measurand]!;
    own.patterns.forEach((place, group) => {
      const batch = kinds.ofPattern[place]!;
      if (batch < 0 || !wanted.includes(kinds.kinds[batch]!)) return;
      const row = { level, pattern: sums.patterns[place]!, sums: own, group, noise };
      const rows = batches.get(batch);
      if (rows === undefined) batches.set(batch, [row]);
      else rows.push(row);
    });
  });
  return [...batches.values()];
}

/** The part's own groups, but for batches shared with other measurands. */
function localOf(marginals: Marginals, { measurand, noise }: Part): Marginal {
  const key = `${measurand}/${noise}`;
  const there = marginals.locals.get(key);
  if (there !== undefined) return there;
  const { sums, kinds } = marginals;
  const own = sums.measurands[measurand]!;
  const plain: Row[] = [];
  const batches = new Map<number, Row[]>();
  const drawn = new Set<number>();
  own.patterns.forEach((place, group) => {
    const pattern = sums.patterns[place]!;
    const batch = kinds.ofPattern[place]!;
    if (batch >= 0 && kinds.kinds[batch] !== "local") return;
    const row = { level: 0, noise, pattern, sums: own, group };
    for (const draw of pattern.draws) if (sums.draws[draw]!.batch === null) drawn.add(draw);
    if (batch < 0) plain.push(row);
    else {
      const rows = batches.get(batch);
      if (rows === undefined) batches.set(batch, [row]);
      else rows.push(row);
    }
  });
  const draws = [...drawn].sort((a, b) => a - b);
  const columns = new Map(draws.map((draw, i) => [draw, i + 1]));
  const system = createSystem(1 + draws.length);
  const local: Marginal = { system, draws, logNorm: 0, squares: 0 };
  for (const row of plain) addGroup(local, row, columns);
  for (const rows of batches.values()) addBatch(local, rows, columns);
  marginals.locals.set(key, local);
  return local;
}

function addLocal(
  marginal: Marginal,
  local: Marginal,
  { level, columns }: { level: number; columns: ReadonlyMap<number, number> },
): void {
  marginal.logNorm += local.logNorm;
  marginal.squares += local.squares + local.system.rss;
  const places = [level, ...local.draws.map((draw) => columns.get(draw)!)];
  const { size, data } = local.system;
  for (let i = 0; i < size; i += 1) {
    const start = i * (size + 1);
    if (data[start + i] === 0) continue;
    const row = new Float64Array(marginal.system.size + 1);
    for (let k = i; k < size; k += 1) row[places[k]!] = data[start + k]!;
    row[marginal.system.size] = data[start + size]!;
    addRow(marginal.system, row, places[i]);
  }
}
