import { archiveInputOf, LEDGER_ID } from "./archive-input";
import { generator } from "./generator";
import { fixedSigner } from "./synthetic-ledger";
import type { Posting } from "./synthetic-ledger";

const MEASURANDS = 40;

/** Many measurements of forty quantities under three hypotheses, so many in each posting. */
export function largeInput(measurements: number, perPosting: number) {
  const random = generator(7);
  const noise = () => (random(2001) + random(2001) + random(2001) - 3000) / 1000;
  const declared: Posting[] = [
    {
      kind: "campaign.opened",
      payload: {
        key: "many-springs",
        title: "Why the springs run warm",
        ledger: LEDGER_ID,
        clock: "real",
        visibility: "public",
      },
    },
    {
      kind: "observable.declared",
      payload: { key: "warmth", title: "Temperature", unit: "K", scale: "linear" },
    },
    { kind: "shared-error.declared", payload: { key: "zero", sd: 0.1 } },
    { kind: "facility.declared", payload: { key: "north" } },
  ];
  for (let m = 0; m < MEASURANDS; m += 1) {
    const reference = { family: "normal", mean: 290, sd: 10 };
    declared.push({
      kind: "measurand.declared",
      payload: { key: `spring-${m}`, observable: "warmth", reference },
    });
  }
  const hypotheses = [0, 1, 2].map((h): Posting[] => [
    {
      kind: "hypothesis.registered",
      payload: {
        key: `h${h}`,
        title: `Hypothesis ${h}`,
        predictions: Array.from({ length: MEASURANDS }, (_, m) => ({
          measurand: `spring-${m}`,
          expected: 288 + (m % 7) + h,
          tolerance: { family: "normal", sd: 1 },
        })),
      },
    },
  ]);
  const rows = Array.from({ length: measurements }, (_, index) => ({
    id: `north:${index}`,
    measurand: `spring-${index % MEASURANDS}`,
    facility: "north",
    observedAt: "2031-03-01T00:00:00Z",
    value: 288 + (index % 7) + noise(),
    sd: 0.8,
    shared: [{ error: "zero" }],
  }));
  const postings: Posting[][] = [];
  for (let at = 0; at < rows.length; at += perPosting) {
    const chunk = rows.slice(at, at + perPosting);
    postings.push([{ kind: "measurements.posted", payload: { measurements: chunk } }]);
  }
  return archiveInputOf(
    "many-springs",
    [declared, ...hypotheses, ...postings],
    fixedSigner("house.example", 1),
  );
}
