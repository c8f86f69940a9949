import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import { scoreCampaign } from "@weighhouse/engine/score";
import { verifyArchive } from "@weighhouse/audit/verify";
import type { CheckRequest, CheckAnswer } from "./check-protocol";

// A worker of its own: hashing an archive's entries would hold the page still.
const scope = self as unknown as {
  addEventListener(type: "message", listener: (event: MessageEvent<CheckRequest>) => void): void;
  postMessage(answer: CheckAnswer): void;
};

scope.addEventListener("message", ({ data }) => {
  // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a worker has one listener, the rule takes it for a window
  scope.postMessage(answerTo(data));
});

function answerTo({ bytes, trustedKey, trustedHead }: CheckRequest): CheckAnswer {
  try {
    const report = verifyArchive(new Uint8Array(bytes), {
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
