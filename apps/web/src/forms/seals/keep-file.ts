import { sealFile, type SealRequest } from "@weighhouse/campaign/sealed-file";

/**
 * Seals in this browser and saves the file to keep: the content goes nowhere else. The file is saved
 * before its digest is filed, so that no seal is on record that nobody can open.
 */
export function keepSealed(request: SealRequest): { digest: string; measurand: string } {
  const bytes = crypto.getRandomValues(new Uint8Array(32));
  const nonce = Array.from(bytes, (byte) => byte.toString(16).padStart(2, "0")).join("");
  const sealed = sealFile(request, nonce);
  const text = `${JSON.stringify(sealed, null, 2)}\n`;
  const link = document.createElement("a");
  link.href = URL.createObjectURL(new Blob([text], { type: "application/json" }));
  link.download = `${sealed.campaign}-${sealed.measurand}-${sealed.digest.slice(0, 8)}.sealed.json`;
  link.click();
  URL.revokeObjectURL(link.href);
  return sealed;
}
