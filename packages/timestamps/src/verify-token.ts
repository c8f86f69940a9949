import { Certificate, CertificateChainValidationEngine, ExtKeyUsage } from "pkijs";
import { bufferOf, plainInteger, SHA_256 } from "./request";
import { readToken } from "./token";
import type { Token } from "./token";

/** What a token says once everything about it is found good; else the reason. */
export type TokenVerdict =
  { ok: true; at: string; authority: string } | { ok: false; reason: string };

export type TokenChecks = {
  /** The bytes whose SHA-256 is stamped. */
  data: Uint8Array;
  /** SHA-256. */
  sha256: (bytes: Uint8Array) => Uint8Array;
  /** The random bytes of the request, where the request is known. */
  nonce?: Uint8Array;
  /** PEM of certificates that are trusted; without, the authority's chain is not checked. */
  trusted?: string | undefined;
};

const TIME_STAMPING = "1.3.6.1.5.5.7.3.8";
const EXT_KEY_USAGE = "2.5.29.37";
const COMMON_NAME = "2.5.4.3";

/**
 * Verifies an RFC 3161 time-stamp: its imprint is that of the data, it is signed by the certificate
 * that it carries, which is for time-stamping alone (section 2.3: critical, and nothing else), and
 * valid at the time it says; with `nonce`, it answers that request; with `trusted`, its chain ends
 * at one of those certificates. Revocation is not looked up: there is no network here.
 */
export async function verifyToken(der: Uint8Array, checks: TokenChecks): Promise<TokenVerdict> {
  const read = readToken(der);
  if (!read.ok) return read;
  try {
    return await verify(read.value, checks);
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    return { ok: false, reason: `it can't be verified: ${why}` };
  }
}

async function verify(token: Token, checks: TokenChecks): Promise<TokenVerdict> {
  const { signed, info } = token;
  const { hashAlgorithm, hashedMessage } = info.messageImprint;
  if (hashAlgorithm.algorithmId !== SHA_256) {
    return fault(`an imprint of the algorithm ${hashAlgorithm.algorithmId}, not SHA-256`);
  }
  const imprint = hashedMessage.valueBlock.valueHexView;
  if (!same(imprint, checks.sha256(checks.data))) return fault("it stamps other bytes");
  if (checks.nonce !== undefined) {
    const nonce = info.nonce?.valueBlock.valueHexView;
    if (nonce === undefined || !same(nonce, plainInteger(checks.nonce))) {
      return fault("it answers another request: the nonce differs");
    }
  }
  if (signed.signerInfos.length !== 1) return fault("it has not one signature");
  const verified = await signed.verify({
    signer: 0,
    data: bufferOf(checks.data),
    extendedMode: true,
  });
  const signer = verified.signerCertificate;
  if (verified.signatureVerified !== true || !signer) return fault("its signature is bad");
  const unfit = unfitFor(signer, info.genTime);
  if (unfit !== null) return fault(unfit);
  const at = info.genTime.toISOString();
  if (checks.trusted === undefined) return { ok: true, at, authority: nameOf(signer) };
  const broken = await brokenChain(token, signer, certificatesOf(checks.trusted));
  return broken === null ? { ok: true, at, authority: nameOf(signer) } : fault(broken);
}

/** Why a certificate may not sign a time-stamp of that time. */
function unfitFor(certificate: Certificate, at: Date): string | null {
  const usage = certificate.extensions?.find(({ extnID }) => extnID === EXT_KEY_USAGE);
  const purposes = (usage?.parsedValue as ExtKeyUsage | undefined)?.keyPurposes ?? [];
  if (usage === undefined || purposes.length !== 1 || purposes[0] !== TIME_STAMPING) {
    return `the certificate of ${nameOf(certificate)} is not for time-stamping alone`;
  }
  if (usage.critical !== true) {
    return `the certificate of ${nameOf(certificate)} doesn't mark its purpose as critical`;
  }
  const [from, to] = [certificate.notBefore.value, certificate.notAfter.value];
  if (at >= from && at <= to) return null;
  return `the certificate of ${nameOf(certificate)} was valid from ${from.toISOString()} to ${to.toISOString()}, not at ${at.toISOString()}`;
}

async function brokenChain(
  { info, certificates }: Token,
  signer: Certificate,
  trustedCerts: Certificate[],
): Promise<string | null> {
  const engine = new CertificateChainValidationEngine({
    trustedCerts,
    // The end of the chain stands last.
    certs: [...certificates.filter((one) => one !== signer), signer],
    checkDate: info.genTime,
  });
  const { result, resultMessage } = await engine.verify({ passedWhenNotRevValues: true });
  if (result) return null;
  return `its certificates lead to none that you trust: ${resultMessage}`;
}

/** @throws {RangeError} where the text holds no certificate */
export function certificatesOf(pem: string): Certificate[] {
  const blocks = pem.matchAll(/-----BEGIN CERTIFICATE-----([\sA-Za-z0-9+/=]+)-----END/g);
  const certificates = [...blocks].map(([, body = ""]) => {
    const der = Uint8Array.from(atob(body.replaceAll(/\s/g, "")), (c) => c.charCodeAt(0));
    return Certificate.fromBER(bufferOf(der));
  });
  if (certificates.length > 0) return certificates;
  throw new RangeError("found no certificate; allowed is PEM");
}

function nameOf({ subject }: Certificate): string {
  const names = subject.typesAndValues;
  const common = names.find(({ type }) => type === COMMON_NAME) ?? names[0];
  return String(common?.value.valueBlock.value ?? "a nameless certificate");
}

function same(a: Uint8Array, b: Uint8Array): boolean {
  return a.length === b.length && a.every((byte, index) => byte === b[index]);
}

function fault(reason: string): TokenVerdict {
  return { ok: false, reason };
}
