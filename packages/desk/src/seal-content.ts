import { randomBytes } from "node:crypto";
import type { Payload } from "@weighhouse/campaign/entries";
import type { Part } from "@weighhouse/campaign/parts";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import type { Access } from "./access";
import type { Appended } from "./appended";
import { checkAfter } from "./check-after";
import { DeskError, invalid } from "./desk-error";
import type { Moment, NewEntry } from "./document-after";

/** What a use-case that seals answers: its entry, and the digest that is on record now. */
export type SealedAppended = Appended & { digest: string };

export type Opening = Payload<"prediction.revealed">;

/** Seals a content that the server will hold: a nonce of its own, and the digest of both. */
export function sealHeld(
  { campaign }: Access,
  bound: { team: string | null; hypothesis: string | null; measurand: string },
  content: Record<string, unknown>,
): Opening {
  const nonce = randomBytes(32).toString("hex");
  const { ledger } = campaign;
  return { digest: sealDigest(nodeHasher, { ledger, ...bound, nonce, content }), nonce, content };
}

/**
 * Refuses a content that could not be opened: the entries are the sealing and an opening at once,
 * and `place` is the field that the content stands in.
 */
export function checkOpened(
  parts: Part[],
  [sealing, opening]: [NewEntry, NewEntry],
  { place, ...moment }: Moment & { place: string },
): void {
  const content = (opening.payload as Opening).content;
  const { hypothesis = null } = sealing.payload as { hypothesis?: string };
  const field =
    hypothesis === null
      ? ({ list: "measurements", key: String(content["id"]), pointer: place } as const)
      : ({ list: "hypotheses", key: hypothesis, pointer: "" } as const);
  try {
    checkAfter(parts, [sealing, opening], { ...moment, fields: [field], pointer: "" });
  } catch (error) {
    if (!(error instanceof DeskError) || error.problems.length === 0) throw error;
    throw invalid(
      error.problems.map((problem) => ({
        ...problem,
        pointer: problem.pointer.replace(/^(\/predictions\/\d+|\/content)/, place),
      })),
    );
  }
}
