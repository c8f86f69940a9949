import { Integer, Null, OctetString } from "asn1js";
import { AlgorithmIdentifier, MessageImprint, TimeStampReq } from "pkijs";

export const SHA_256 = "2.16.840.1.101.3.4.2.1";

/**
 * DER of a TimeStampReq (RFC 3161 section 2.4.1) for a SHA-256, asking for the authority's
 * certificate in the answer.
 *
 * @param sha256 the imprint, 32 bytes
 * @param nonce random bytes that the answer must repeat
 */
export function timeStampRequest(sha256: Uint8Array, nonce: Uint8Array): Uint8Array {
  const request = new TimeStampReq({
    version: 1,
    messageImprint: new MessageImprint({
      hashAlgorithm: new AlgorithmIdentifier({ algorithmId: SHA_256, algorithmParams: new Null() }),
      hashedMessage: new OctetString({ valueHex: bufferOf(sha256) }),
    }),
    // A first byte with its highest bit clear and not zero: DER has one spelling for it.
    nonce: new Integer({ valueHex: bufferOf(plainInteger(nonce)) }),
    certReq: true,
  });
  return new Uint8Array(request.toSchema().toBER());
}

/** The nonce as it stands in DER. */
export function plainInteger(nonce: Uint8Array): Uint8Array {
  return nonce.map((byte, index) => (index === 0 ? (byte & 0x7f) | 0x40 : byte));
}

export function bufferOf(bytes: Uint8Array): ArrayBuffer {
  return new Uint8Array(bytes).buffer;
}
