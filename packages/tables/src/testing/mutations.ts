import * as fc from "fast-check";

/** A file's bytes with some flipped, cut out, doubled or moved, as broken disks and hands do it. */
export function mutated(files: readonly Uint8Array[]): fc.Arbitrary<Uint8Array> {
  return fc
    .constantFrom(...files)
    .chain((bytes) =>
      fc
        .array(mutation(bytes.length), { minLength: 1, maxLength: 4 })
        .map((steps) => steps.reduce((changed, step) => step(changed), bytes)),
    );
}

type Step = (bytes: Uint8Array) => Uint8Array;

function mutation(length: number): fc.Arbitrary<Step> {
  const place = fc.nat(Math.max(0, length - 1));
  return fc.oneof(
    fc.tuple(place, fc.nat(255)).map(
      ([at, byte]): Step =>
        (bytes) =>
          set(bytes, at, byte),
    ),
    fc.tuple(place, fc.nat(7)).map(
      ([at, bit]): Step =>
        (bytes) =>
          set(bytes, at, (bytes[at] ?? 0) ^ (1 << bit)),
    ),
    fc.tuple(place, fc.constantFrom(..."\0\n\r\"'#,;:-[]{}&*!<>=?/09eE. ")).map(
      ([at, letter]): Step =>
        (bytes) =>
          set(bytes, at, letter.charCodeAt(0)),
    ),
    place.map(
      (at): Step =>
        (bytes) =>
          bytes.slice(0, at),
    ),
    fc.tuple(place, fc.nat(60)).map(
      ([at, count]): Step =>
        (bytes) =>
          joined(bytes.subarray(0, at), bytes.subarray(at + count)),
    ),
    fc.tuple(place, fc.nat(200)).map(
      ([at, count]): Step =>
        (bytes) =>
          joined(bytes.subarray(0, at + count), bytes.subarray(at)),
    ),
  );
}

function set(bytes: Uint8Array, at: number, byte: number): Uint8Array {
  const changed = bytes.slice();
  if (at < changed.length) changed[at] = byte;
  return changed;
}

function joined(a: Uint8Array, b: Uint8Array): Uint8Array {
  const both = new Uint8Array(a.length + b.length);
  both.set(a);
  both.set(b, a.length);
  return both;
}
