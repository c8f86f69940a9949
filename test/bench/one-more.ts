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
/** What larger campaigns are held against. */
const SMALL = 1000;

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

/** A state of n measurements, and what is done to it. */
class Grown {
  private state: EngineState;
  private readonly rest: Measurement[];
  private next = 0;

  constructor(
    source: Source,
    private readonly n: number,
  ) {
    this.state = grown(source, n);
    this.rest = source.part(n, n + MANY);
    evidencesOf(this.state);
  }

  addOne(): void {
    add(this.state, [this.rest[this.next]!]);
    this.next += 1;
  }

  /** The last one goes again. */
  removeOne(): void {
    this.next -= 1;
    const revision = { place: this.n + this.next, before: this.rest[this.next]!, after: null };
    const revised = reviseMeasurements(this.state, [revision]);
    if (revised === null || !revised.ok) throw new Error("refused");
    this.state = revised.value.state;
  }

  evidences(): void {
    evidencesOf(this.state);
  }
}

/** Medians of the large and of the small, by turns: a core changes its pace within a second. */
function byTurns(repeats: number, of: [() => void, () => void]): [number, number] {
  const times: [number[], number[]] = [[], []];
  for (let repeat = 0; repeat < repeats; repeat += 1) {
    for (const side of [0, 1] as const) {
      const start = performance.now();
      of[side]();
      times[side].push(performance.now() - start);
    }
  }
  return times.map((all) => all.sort((a, b) => a - b)[Math.floor(repeats / 2)]!) as [
    number,
    number,
  ];
}

function measured(sourceOf: (n: number) => Source, n: number) {
  const [large, small] = [new Grown(sourceOf(n), n), new Grown(sourceOf(SMALL), SMALL)];
  const added = byTurns(MANY, [() => large.addOne(), () => small.addOne()]);
  const point = byTurns(25, [() => large.evidences(), () => small.evidences()]);
  const removed = byTurns(MANY, [() => large.removeOne(), () => small.removeOne()]);
  const whole = medianMs(1, () => evidencesOf(grown(sourceOf(n), n)));
  return { added, removed, point, whole };
}

function table(title: string, sourceOf: (n: number) => Source, sizes: readonly number[]): void {
  // Compiled before anything is counted.
  for (let warm = 0; warm < 4; warm += 1) measured(sourceOf, SMALL);
  console.log(`\nOne measurement more and one fewer, ${title}; ratios to ${SMALL}, by turns`);
  console.log(
    "        N   add (us)  ratio  remove (us)  ratio  all evidences (ms)  ratio  whole again / one more",
  );
  for (const n of sizes) {
    const { added, removed, point, whole } = measured(sourceOf, n);
    const ratio = ([of, baseline]: [number, number]) => (of / baseline).toFixed(2);
    console.log(
      line([
        [n, 9],
        [(1000 * added[0]).toFixed(1), 10],
        [ratio(added), 6],
        [(1000 * removed[0]).toFixed(1), 12],
        [ratio(removed), 6],
        [point[0].toFixed(2), 19],
        [ratio(point), 6],
        [(whole / (added[0] + point[0])).toFixed(0), 23],
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
