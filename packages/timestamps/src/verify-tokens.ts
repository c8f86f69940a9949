import { verifyToken } from "./verify-token";
import type { TokenChecks, TokenVerdict } from "./verify-token";

/**
 * Verifies tokens ahead, so that who can't wait may ask for their verdicts.
 *
 * @returns gives the verdict of one of these tokens over one of these notes
 */
export async function verifyTokens(
  stamped: readonly { token: Uint8Array; note: Uint8Array }[],
  checks: Omit<TokenChecks, "data">,
): Promise<(token: Uint8Array, note: Uint8Array) => TokenVerdict> {
  const verdicts = new Map<string, TokenVerdict>();
  const nameOf = (token: Uint8Array, note: Uint8Array) =>
    `${checks.sha256(token).join()} ${checks.sha256(note).join()}`;
  for (const { token, note } of stamped) {
    const verdict = await verifyToken(token, { ...checks, data: note });
    const unchecked = verdict.ok && checks.trusted === undefined;
    verdicts.set(
      nameOf(token, note),
      unchecked ? { ...verdict, authority: `${verdict.authority}, ${UNCHECKED}` } : verdict,
    );
  }
  return (token, note) =>
    verdicts.get(nameOf(token, note)) ?? { ok: false, reason: "it wasn't among those verified" };
}

const UNCHECKED = "not checked against a certificate you hold";
