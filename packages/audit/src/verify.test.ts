import { describe, expect, it } from "vitest";
import { scoreCampaign } from "@weighhouse/engine/score";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { formatTreeHead, parseTreeHead, signTreeHead } from "@weighhouse/ledger/tree-head";
import { encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import { CHECKS } from "./checks/line";
import { forgeLedger, tamper } from "./testing/forge";
import { LEDGER_ID } from "./testing/archive-input";
import { generator } from "./testing/generator";
import { archiveInput, marshTransactions } from "./testing/marsh-campaign";
import { appendTransactions, fixedSigner } from "./testing/synthetic-ledger";
import { detailOf, failures, house, signedHead, verify } from "./testing/verify-marsh";
import { verifyArchive } from "./verify";
import type { VerifyOptions } from "./verify";
import { writeArchive } from "./write";
import { unpackFiles } from "./zip/read";
import { packFiles } from "./zip/write";

const input = archiveInput();
const archive = writeArchive(input);

describe("a good archive", () => {
  it("is ok in each line, and says what it isn't checked against", () => {
    const report = verify(archive);
    expect(report.lines.map(({ check, outcome }) => [check, outcome])).toEqual(
      CHECKS.map((check) => [
        check,
        ["keys you hold", "tree head you hold", "seals", "time-stamps"].includes(check)
          ? "not present"
          : "ok",
      ]),
    );
    expect(report.ok).toBe(true);
    expect(detailOf(report, "keys you hold")).toBe(
      `not present: signed by ${fingerprint(house.publicKey)}, not checked against a key you hold`,
    );
    expect(detailOf(report, "standings")).toMatch(
      /^ok: \d{2,} numbers computed anew, all within 1e-9; engine [\d.]+$/,
    );
    expect(detailOf(report, "standings")).toContain(ENGINE_VERSION);
  });

  it("reads the same in plain JavaScript, as in a browser", () => {
    const plain = verifyArchive(archive, { hasher: nobleHasher, score: scoreCampaign });
    expect(plain).toEqual(verify(archive));
  });

  it("with a simulated clock says so in a line", () => {
    const report = verify(writeArchive(archiveInput(marshTransactions("simulated"))));
    expect(report.ok).toBe(true);
    expect(detailOf(report, "clock")).toMatch(/^not present: simulated, by entry 0/);
    expect(detailOf(verify(archive), "clock")).toMatch(/^ok: /);
  });

  it("packed anew by another program, in another order, is still good", () => {
    expect(verify(tamper(archive, {})).ok).toBe(true);
  });
});

describe("one changed byte fails and names the place", () => {
  const files = unpackFiles(archive);

  it.each([...files.keys()])("%s", (path) => {
    const bytes = files.get(path) as Uint8Array;
    const random = generator(path.length * 7919 + bytes.length);
    for (let round = 0; round < 2; round += 1) {
      const at = random(bytes.length);
      const to = bytes.map((byte, index) => (index === at ? byte ^ (1 + random(255)) : byte));
      const changed = new Map(files).set(path, to);
      const report = verify(
        packFiles([...changed].map(([name, content]) => ({ path: name, bytes: content }))),
      );
      const places = report.lines
        .filter(({ outcome }) => outcome === "failed")
        .map(({ detail }) => detail)
        .join("\n");
      expect(report.ok).toBe(false);
      expect(places, `byte ${at}`).toContain(path);
    }
  });
});

describe("keys and heads that a reader holds", () => {
  it("the right key is named as held", () => {
    const report = verify(archive, { trustedKeys: [`${encodeVerifierKey(house)}\n`] });
    expect(detailOf(report, "keys you hold")).toBe(
      `ok: signed by ${fingerprint(house.publicKey)}, which you hold`,
    );
  });

  it("a head held says how far back nothing was touched", () => {
    const report = verify(archive, { trustedHead: input.heads[2] as string });
    expect(detailOf(report, "tree head you hold")).toBe(
      "ok: the first 11 entries are those of the head you hold; 6 came later",
    );
  });

  it.each([
    ["a key that is none", { trustedKeys: ["no key"] }, "the key you gave: found another text"],
    ["a head that is none", { trustedHead: "no head" }, "the head you gave: found"],
    [
      "a head of another ledger",
      { trustedHead: signedHead(3, new Uint8Array(32), "other") },
      `the head you hold is of the ledger other, this one is ${LEDGER_ID}`,
    ],
    [
      "a head of more entries",
      { trustedHead: signedHead(18, new Uint8Array(32)) },
      "the head you hold is of 18 entries, this archive has 17: it is older, or entries are missing",
    ],
  ])("%s is refused in its line", (_, options, words) => {
    const report = verify(archive, options);
    expect(report.ok).toBe(false);
    expect(report.lines.some(({ detail }) => detail.startsWith(words))).toBe(true);
  });
});

it("heads signed before the keys were changed stay good; the new key is the one to hold", () => {
  const successor = fixedSigner("house.example", 2);
  const heads = input.heads.map((note, index) =>
    index < 4 ? note : signTreeHead(formatTreeHead(parseTreeHead(note)), successor),
  );
  const rotated = writeArchive({ ...input, heads, signer: successor });
  expect(detailOf(verify(rotated), "signatures of the tree heads")).toBe(
    `ok: 8 tree heads, by ${fingerprint(house.publicKey)}, ${fingerprint(successor.publicKey)}`,
  );
  expect(verify(rotated, { trustedKeys: [encodeVerifierKey(successor)] }).ok).toBe(true);
  expect(failures(verify(rotated, { trustedKeys: [encodeVerifierKey(house)] }))).toEqual([
    "keys you hold",
  ]);
});

describe("another engine", () => {
  const other: VerifyOptions["score"] = (document, options) => {
    const scored = scoreCampaign(document, options);
    return scored.ok ? { ok: true, value: { ...scored.value, engine: "99.0.0" } } : scored;
  };

  it("that agrees is named", () => {
    const report = verify(archive, { score: other });
    expect(report.ok).toBe(true);
    expect(detailOf(report, "standings")).toContain(
      `engine ${ENGINE_VERSION} in the archive, 99.0.0 here`,
    );
  });

  it("that differs is named before the places", () => {
    const report = verify(archive, {
      score: (document, options) => {
        const scored = other(document, options);
        if (scored.ok) scored.value.noModel.lnEvidence = 0;
        return scored;
      },
    });
    expect(detailOf(report, "standings")).toContain(
      `failed: engine ${ENGINE_VERSION} in the archive, 99.0.0 here; standings.json, /noModel/lnEvidence`,
    );
  });

  it("that can't score the document says why", () => {
    const problems = [
      {
        pointer: "/measurands/0",
        code: "not-yet-supported",
        found: "a curve",
        allowed: "constants",
      },
    ] as const;
    const report = verify(archive, { score: () => ({ ok: false, problems: [...problems] }) });
    expect(detailOf(report, "standings")).toContain("/measurands/0: found a curve");
  });
});

it.each([
  [
    "a measurement of an unknown measurand",
    "measurements.posted",
    { measurements: [{ id: "x", measurand: "no-such", value: 1, sd: 1 }] },
    "rules of the entries",
  ],
  [
    "a prediction of an unknown measurand",
    "hypothesis.registered",
    { key: "x", title: "X", predictions: [{ measurand: "no-such", expected: 1 }] },
    "campaign document",
  ],
] as const)("%s is refused, and never scored", (_, kind, payload, check) => {
  const ledger = appendTransactions(
    "steaming-marsh",
    LEDGER_ID,
    [...marshTransactions(), [{ kind, payload }]],
    house,
  );
  const scored: unknown[] = [];
  const report = verify(forgeLedger(archive, ledger, house), {
    score: (document, options) => {
      scored.push(document);
      return scoreCampaign(document, options);
    },
  });
  expect(detailOf(report, check)).toMatch(/^failed: .*no-such/);
  expect(detailOf(report, "standings")).toBe(`failed: not checked, because "${check}" failed`);
  expect(scored).toEqual([]);
});

it("what is no archive fails in its first line, and nothing else is claimed", () => {
  const report = verify(new TextEncoder().encode("not an archive"));
  expect(report.ok).toBe(false);
  expect(report.lines.map(({ outcome }) => outcome)).toEqual(CHECKS.map(() => "failed"));
  expect(detailOf(report, "standings")).toBe('failed: not checked, because "container" failed');
});
