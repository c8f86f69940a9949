/**
 * Changes every byte of an archive in turn, two ways each, and says what became of it: run by hand,
 * `npm run every-byte --workspace test`.
 *
 * Of 31,672 bytes, two changes each: 62,062 found; 1,276 harmless, in the fields of the container that
 * say nothing of a file (time, date, versions, attributes and disk, in its two headers); 6 harmless in
 * packed content that unpacks to the very same bytes. 2 minutes of CPU.
 */
import { OneByte } from "@weighhouse/audit/testing/one-byte";

const WAYS = [0x01, 0xff];

const one = new OneByte();
const fates = new Map<string, number>();
for (let at = 0; at < one.archive.length; at += 1) {
  for (const by of WAYS) {
    const { field, fate } = one.change(at, by);
    const what = fate === "found" ? fate : `${fate}: ${field}`;
    fates.set(what, (fates.get(what) ?? 0) + 1);
  }
}
console.log(`${one.archive.length} bytes, ${WAYS.length} changes each`);
for (const [what, count] of [...fates].sort()) console.log(`${String(count).padStart(7)} ${what}`);
process.exitCode = [...fates.keys()].some((what) => what.startsWith("missed")) ? 1 : 0;
