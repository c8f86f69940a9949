import { fromBER } from "asn1js";
import { Certificate, ContentInfo, SignedData, TimeStampResp, TSTInfo } from "pkijs";
import { bufferOf } from "./request";

/** What is in an RFC 3161 token, not checked. */
export type Token = { signed: SignedData; info: TSTInfo; certificates: Certificate[] };

export type ReadToken = { ok: true; value: Token } | { ok: false; reason: string };

const SIGNED_DATA = "1.2.840.113549.1.7.2";
const TST_INFO = "1.2.840.113549.1.9.16.1.4";

/** Statuses of a TimeStampResp that has a token: granted, granted with modifications. */
const GRANTED = [0, 1];

/** Reads the DER of a TimeStampResp, or of its token alone. Never throws: it is a stranger's. */
export function readToken(der: Uint8Array): ReadToken {
  try {
    return read(der);
  } catch {
    return { ok: false, reason: "no time-stamp as RFC 3161 has it" };
  }
}

function read(der: Uint8Array): ReadToken {
  const parsed = fromBER(bufferOf(der));
  if (parsed.offset !== der.length) return { ok: false, reason: "no DER, or more after it" };
  // Lengths that don't fit are read past; DER has one spelling, which is what is written again.
  const again = new Uint8Array(parsed.result.toBER());
  if (again.length !== der.length || again.some((byte, index) => byte !== der[index])) {
    return { ok: false, reason: "no DER: written again it is another" };
  }
  const content = contentOf(parsed.result);
  if (typeof content === "string") return { ok: false, reason: content };
  if (content.contentType !== SIGNED_DATA)
    return { ok: false, reason: "a token that isn't signed" };
  const signed = new SignedData({ schema: content.content });
  const { eContentType, eContent } = signed.encapContentInfo;
  if (eContentType !== TST_INFO || eContent === undefined) {
    return { ok: false, reason: "a signed content that is no time-stamp" };
  }
  const info = TSTInfo.fromBER(bufferOf(new Uint8Array(eContent.getValue())));
  const certificates = (signed.certificates ?? []).filter((one) => one instanceof Certificate);
  return { ok: true, value: { signed, info, certificates } };
}

/** A response begins with a sequence (its status), a token alone with an object identifier. */
function contentOf(schema: ReturnType<typeof fromBER>["result"]): ContentInfo | string {
  const first = (schema.valueBlock as { value?: { idBlock: { tagNumber: number } }[] }).value?.[0];
  if (first?.idBlock.tagNumber === 6) return new ContentInfo({ schema });
  const { status, timeStampToken } = new TimeStampResp({ schema });
  if (GRANTED.includes(status.status) && timeStampToken !== undefined) return timeStampToken;
  const words = (status.statusStrings ?? []).map((text) => text.valueBlock.value).join("; ");
  return `refused by the authority: status ${status.status} ${words}`.trim();
}
