import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { scoreCampaign } from "@weighhouse/engine/score";
import { stampedHeads } from "@weighhouse/audit/stamped-heads";
import { verifyArchive } from "@weighhouse/audit/verify";
import type { CheckRequest, CheckAnswer } from "./check-protocol";

// A worker of its own: hashing an archive's entries would hold the page still.
const scope = self as unknown as {
  addEventListener(type: "message", listener: (event: MessageEvent<CheckRequest>) => void): void;
  postMessage(answer: CheckAnswer): void;
};

scope.addEventListener("message", ({ data }) => {
  // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a worker has one listener, the rule takes it for a window
  void answerTo(data).then((answer) => scope.postMessage(answer));
});

async function answerTo({ bytes, trustedKey, trustedHead }: CheckRequest): Promise<CheckAnswer> {
  try {
    const archive = new Uint8Array(bytes);
    const report = verifyArchive(archive, {
      ...(await tokenVerifier(archive)),
      hasher: nobleHasher,
      score: scoreCampaign,
      ...(trustedKey === null ? {} : { trustedKeys: [trustedKey] }),
      ...(trustedHead === null ? {} : { trustedHead }),
    });
    return { report, failure: null };
  } catch (error) {
    return { report: null, failure: error instanceof Error ? error.message : String(error) };
  }
}

/** What verifies certificates is loaded only where there are any. */
async function tokenVerifier(archive: Uint8Array) {
  const stamped = stampedHeads(archive);
  if (stamped.length === 0) return {};
  const { verifyTokens } = await import("@weighhouse/timestamps/verify-tokens");
  return { verifyToken: await verifyTokens(stamped, { sha256: nobleHasher }) };
}
