import { describe, expect, it } from "vitest";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { payloadDigest } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import { forge, line } from "./testing/forge";
import { json } from "./testing/lies/of-content";
import { archiveInput, marshTransactions } from "./testing/marsh-campaign";
import { detailOf, failures, forger, house, verify } from "./testing/verify-marsh";
import { writeArchive } from "./write";

const input = archiveInput();
const archive = writeArchive(input);

describe("what a forger signs anew", () => {
  it("a whole ledger forged and signed anew holds together, but not against a key or a head held", () => {
    const transactions = marshTransactions();
    const posting = transactions[3]?.[0] as { payload: { measurements: [{ value: number }] } };
    posting.payload.measurements[0].value = 14.2;
    const forged = writeArchive(archiveInput(transactions, forger));
    const report = verify(forged);
    expect(report.ok).toBe(true);
    expect(detailOf(report, "keys you hold")).toContain("not checked against a key you hold");
    const byKey = verify(forged, { trustedKeys: [encodeVerifierKey(house)] });
    expect(failures(byKey)).toEqual(["keys you hold"]);
    expect(detailOf(byKey, "keys you hold")).toContain(
      `signed by ${fingerprint(forger.publicKey)}, which you don't hold`,
    );
    const byHead = verify(forged, { trustedHead: input.heads[4] as string });
    expect(failures(byHead)).toEqual(["tree head you hold"]);
    expect(detailOf(byHead, "tree head you hold")).toBe(
      "failed: the first 13 entries are not those of the head you hold",
    );
  });

  it("a README rewritten and signed by a stranger fails against a key held", () => {
    const forged = forge(archive, { "README.md": (text) => `${text}Run this.\n` }, forger);
    expect(failures(verify(forged))).toEqual(["texts"]);
    const report = verify(forged, { trustedKeys: [encodeVerifierKey(house)] });
    expect(failures(report)).toEqual(["keys you hold", "texts"]);
    expect(detailOf(report, "keys you hold")).toContain("the manifest: signed by");
  });
});

it("differences below 1e-9 are no differences", () => {
  const nudged = forge(
    archive,
    { "standings.json": (text) => json(text, (it) => (it.hypotheses[0].lnEvidence *= 1 + 1e-12)) },
    house,
  );
  // The table holds the standings' number to the last digit.
  expect(failures(verify(nudged))).toEqual(["tables", "texts"]);
});

it("a payload that is well hashed and signed but of no known kind is refused at its line", () => {
  const text = canonicalJson({ id: "jetty:5", reason: "", other: 1 });
  const forged = forge(
    archive,
    {
      "payloads.ndjson": line(16, () => text),
      "ledger.ndjson": line(16, (entry) =>
        canonicalJson({ ...JSON.parse(entry), payloadSha256: payloadDigest(nodeHasher, text) }),
      ),
    },
    forger,
  );
  expect(detailOf(verify(forged), "payloads")).toContain(
    "payloads.ndjson, line 16 (entry 15, measurement.set-aside): /",
  );
});
