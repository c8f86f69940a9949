/**
 * What one more measurement costs, and one fewer, as a campaign grows: against scoring the whole
 * campaign again. Run by `npm run bench`.
 */
import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { evidencesOf } from "@weighhouse/engine/evidences";
import {
  addMeasurements,
  createState,
  reviseMeasurements,
  type EngineState,
} from "@weighhouse/engine/state";
import { curveCampaign, curveMeasurements } from "./curve-campaign";
import { inventedCampaign, measurementsOf, type Size } from "./invented-campaign";
import { line, medianMs } from "./timing";

const shape = { measurands: 10, errors: 4, hypotheses: 5 };
const MANY = 200;
const CHUNK = 10_000;

/** A campaign without measurements, and measurements [begin, end) of it, as read. */
interface Source {
  frame: CampaignDocument;
  part(begin: number, end: number): Measurement[];
}

function constants(perBatch: number): Source {
  const size: Size = { ...shape, measurements: 1, perBatch };
  const { measurements, ...frame } = inventedCampaign(size);
  const [template] = measurements;
  const part = (begin: number, end: number) =>
    measurementsOf(size, begin, end).map((one) => ({
      ...template!,
      ...one,
      shared: one.shared.map((each) => ({ coefficient: 1, ...each })),
    }));
  return { frame: { ...frame, measurements: [] }, part };
}

function curves(): Source {
  const frame = { ...curveCampaign(1), measurements: [] };
  return { frame, part: curveMeasurements };
}

function grown({ frame, part }: Source, n: number): EngineState {
  const made = createState(frame);
  if (!made.ok) throw new Error(JSON.stringify(made.problems));
  for (let begin = 0; begin < n; begin += CHUNK) {
    add(made.value, part(begin, Math.min(begin + CHUNK, n)));
  }
  return made.value;
}

function add(state: EngineState, measurements: readonly Measurement[]): void {
  const added = addMeasurements(state, measurements);
  if (!added.ok) throw new Error(JSON.stringify(added.problems.slice(0, 3)));
}

function measured(source: Source, n: number) {
  const { part } = source;
  let state = grown(source, n);
  evidencesOf(state);
  const rest = part(n, n + MANY);
  let next = 0;
  const added = medianMs(MANY, () => {
    add(state, [rest[next]!]);
    next += 1;
  });
  const point = medianMs(25, () => evidencesOf(state));
  // The last ones go again, one at a time.
  const removed = medianMs(MANY, () => {
    next -= 1;
    const revision = { place: n + next, before: rest[next]!, after: null };
    const revised = reviseMeasurements(state, [revision]);
    if (revised === null || !revised.ok) throw new Error("refused");
    state = revised.value.state;
  });
  const whole = medianMs(1, () => evidencesOf(grown(source, n)));
  return { added, removed, point, whole };
}

function table(title: string, sourceOf: (n: number) => Source, sizes: readonly number[]): void {
  // Compiled before anything is counted.
  for (let warm = 0; warm < 4; warm += 1) measured(sourceOf(1000), 1000);
  console.log(`\nOne measurement more and one fewer, ${title}; ratios to the first row`);
  console.log(
    "        N   add (us)  ratio  remove (us)  ratio  all evidences (ms)  ratio  whole again / one more",
  );
  let first: ReturnType<typeof measured> | null = null;
  for (const n of sizes) {
    const now = measured(sourceOf(n), n);
    first ??= now;
    console.log(
      line([
        [n, 9],
        [(1000 * now.added).toFixed(1), 10],
        [(now.added / first.added).toFixed(2), 6],
        [(1000 * now.removed).toFixed(1), 12],
        [(now.removed / first.removed).toFixed(2), 6],
        [now.point.toFixed(2), 19],
        [(now.point / first.point).toFixed(2), 6],
        [(now.whole / (now.added + now.point)).toFixed(0), 23],
      ]),
    );
  }
}

const all = [1000, 10_000, 100_000, 1_000_000];
table("four shared errors", () => constants(0), all);
table("and a zero point a night, 100 nights", (n) => constants(n / 100), all);
// An unknown more for each night: what is promised is O(k^2), k their number.
table("and a zero point a night, each of 100", () => constants(100), [1000, 10_000, 100_000]);
table("a curve: polynomial reference, a line expected", curves, all);
