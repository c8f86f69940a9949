import * as fc from "fast-check";
import { archiveInputOf } from "@weighhouse/audit/testing/archive-input";
import { transactionsOf } from "@weighhouse/audit/testing/ledger-of-document";
import { archiveInput } from "@weighhouse/audit/testing/marsh-campaign";
import { sealedTransactions } from "@weighhouse/audit/testing/sealed-marsh";
import { fixedSigner } from "@weighhouse/audit/testing/synthetic-ledger";
import { writeArchive } from "@weighhouse/audit/write";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { documentFrom } from "@weighhouse/engine/testing/documents";
import { campaigns } from "@weighhouse/engine/testing/random-campaigns";

const signer = fixedSigner("house.example", 1);

function archiveOf(document: CampaignDocument): Uint8Array {
  const transactions = transactionsOf(document, 3);
  return writeArchive(archiveInputOf(document.campaign.key, transactions, signer));
}

/** Random campaigns whose every evidence check.py covers: at most one bounded unknown. */
function randomArchives(count: number): [string, Uint8Array][] {
  const spread = { level: 10, unit: 1, flats: 1, measurements: { least: 3, most: 12 } };
  return fc
    .sample(campaigns(spread), { numRuns: count, seed: 20310201 })
    .map((document, index) => [`random campaign ${index}`, archiveOf(document)]);
}

/** Intervals, hard bounds and groups, which random campaigns don't have. */
function bounded(): CampaignDocument {
  const normal = { family: "normal", sd: 0.6 };
  return documentFrom({
    campaign: { key: "bounds", title: "Bounds", noneOfThese: { weight: 0.5 } },
    observables: [
      { key: "plain", title: "Plain", unit: "m", scale: "linear" },
      { key: "log", title: "Log", unit: "kg", scale: "log10" },
      { key: "mag", title: "Brightness", unit: "mag", scale: "magnitude" },
    ],
    measurands: [
      { key: "width", observable: "plain", reference: { family: "uniform", lower: 0, upper: 9 } },
      { key: "mass", observable: "log", reference: { family: "uniform", lower: 1, upper: 1000 } },
      { key: "glow", observable: "mag", reference: { family: "normal", mean: 12, sd: 3 } },
      { key: "depth", observable: "plain", reference: { family: "uniform", lower: -4, upper: 4 } },
    ],
    sharedErrors: [{ key: "ruler", sd: 0.2 }],
    hypotheses: [
      {
        key: "narrow",
        title: "Narrow",
        group: "pair",
        predictions: [
          { measurand: "width", tolerance: { family: "interval", lower: 3, upper: 4 } },
          { measurand: "mass", tolerance: { family: "atMost", bound: 30 } },
          { measurand: "glow", expected: 11, tolerance: normal },
        ],
      },
      {
        key: "broad",
        title: "Broad",
        group: "pair",
        weight: 2,
        predictions: [
          { measurand: "width", tolerance: { family: "interval", lower: 0.5, upper: 8 } },
          {
            measurand: "mass",
            tolerance: { family: "interval", lower: 40, upper: 90, sharing: "each" },
          },
          { measurand: "depth", tolerance: { family: "atLeast", bound: 1 } },
        ],
      },
      { key: "exact", title: "Exact", predictions: [{ measurand: "glow", expected: 11.4 }] },
    ],
    measurements: [
      { id: "a", measurand: "width", value: 3.2, sd: 0.5, shared: [{ error: "ruler" }] },
      {
        id: "b",
        measurand: "width",
        value: 3.9,
        sd: 0.4,
        shared: [{ error: "ruler", coefficient: -0.5 }],
      },
      { id: "c", measurand: "mass", value: 24, sdDex: 0.1 },
      { id: "d", measurand: "mass", value: 31, sd: 4 },
      { id: "mm", measurand: "width", value: 3450, sd: 600, unit: "mm" },
      { id: "g", measurand: "mass", value: 28_000, sd: 5000, unit: "g" },
      { id: "e", measurand: "glow", value: 11.2, sd: 0.2 },
      { id: "f", measurand: "depth", value: -40, sd: 0.7 },
      { id: "h", measurand: "depth", value: 1.5, sd: 0.7, setAside: { reason: "for the test" } },
    ],
  });
}

export function marshArchives(): [string, Uint8Array][] {
  return [
    ["the marsh", writeArchive(archiveInput())],
    ["the marsh with seals", writeArchive(archiveInput(sealedTransactions()))],
  ];
}

/** Archives whose every evidence check.py computes; the first two are the marsh's. */
export function coveredArchives(): [string, Uint8Array][] {
  return [...marshArchives(), ["bounds", archiveOf(bounded())], ...randomArchives(8)];
}

/** Forms that it doesn't compute: a curve, an event, an expression, a limit. */
export function uncoveredArchive(): Uint8Array {
  return archiveOf(
    documentFrom({
      campaign: { key: "forms", title: "Forms" },
      observables: [
        { key: "plain", title: "Plain", unit: "m", scale: "linear" },
        { key: "seen", title: "Seen", scale: "event" },
      ],
      measurands: [
        { key: "width", observable: "plain", reference: { family: "uniform", lower: 0, upper: 9 } },
        { key: "flash", observable: "seen" },
      ],
      hypotheses: [
        {
          key: "one",
          title: "One",
          parameters: [{ key: "a", prior: { family: "normal", mean: 3, sd: 1 } }],
          predictions: [{ measurand: "width", expected: "2 * a" }],
        },
        { key: "two", title: "Two", predictions: [{ measurand: "flash", probability: 0.9 }] },
      ],
      measurements: [
        { id: "a", measurand: "width", value: 3.2, sd: 0.5 },
        { id: "b", measurand: "flash", occurred: true },
      ],
    }),
  );
}

/** Titles that TeX, CSV and SVG would each read as something else. */
export function hostileTitles(): Uint8Array {
  const ascii = String.fromCharCode(...Array.from({ length: 95 }, (_, index) => 32 + index));
  const title = (text: string) => ({ title: text, statement: `${ascii} ${text}` });
  const names = [
    ascii.trim(),
    "\\input{/etc/passwd} \\end{document} ^^5c %comment & # ~ _ $x$ {open",
    "Größe, façade, Ångström, Łódź, señor, naïve, œuvre, ǆ, ő",
    "α β γ δ ε ς σ ω Γ Δ Ω µ ± × · ≤ ≥ ≈ ∞ √ ° ′ ″ ⊙ 10⁻²³ H₂O",
    "潮 水 \u{1f30a} \u0301 \ufffd …–—‘’“”",
    "-- --- `` '' ?` !` ,, << >>",
  ];
  return archiveOf(
    documentFrom({
      campaign: { key: "titles", title: names.join(" ").slice(0, 480) },
      observables: [{ key: "plain", title: "Plain", unit: "kg_1^2 % of {m}", scale: "linear" }],
      measurands: names.map((text, index) => ({
        key: `m${index}`,
        title: text,
        observable: "plain",
        reference: { family: "uniform", lower: 0, upper: 9 },
      })),
      hypotheses: names.map((text, index) => ({
        key: `h${index}`,
        ...title(text),
        predictions: [{ measurand: `m${index}`, expected: 3 }],
      })),
      measurements: names.map((_, index) => ({
        id: `x:_${index}`,
        measurand: `m${index}`,
        value: 3 + index,
        sd: 0.5,
        ...(index === 0 ? { setAside: { reason: ascii } } : {}),
      })),
    }),
  );
}
