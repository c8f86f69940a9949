import { zipSync } from "fflate";
import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { crc32 } from "./crc32";
import { ZIP_LIMITS } from "./limits";
import { unpackFiles } from "./read";
import { packFiles } from "./write";
import { concat, zipOf } from "../testing/zip-of";
import type { Row } from "../testing/zip-of";

const bytes = (text: string) => new TextEncoder().encode(text);
const plain = packFiles([
  { path: "README.md", bytes: bytes("a readme\n".repeat(50)) },
  { path: "heads/0000000001.note", bytes: bytes("a head\n") },
  { path: "empty.txt", bytes: bytes("") },
]);

it("CRC-32 of the digits 1 to 9 is the published check value", () => {
  // Common practice: "check" of CRC-32/ISO-HDLC in every catalogue of CRCs.
  expect(crc32(bytes("123456789"))).toBe(0xcbf43926);
});

it("what was packed unpacks, whatever the files", () => {
  fc.assert(
    fc.property(
      fc.uniqueArray(
        fc.tuple(fc.stringMatching(/^[a-z0-9]{1,8}(\/[a-z0-9]{1,8})?$/), fc.uint8Array()),
        {
          selector: ([path]) => path,
          maxLength: 20,
        },
      ),
      (files) => {
        const packed = packFiles(files.map(([path, content]) => ({ path, bytes: content })));
        const unpacked = unpackFiles(packed);
        expect(unpacked.size).toBe(files.length);
        for (const [path, content] of files) {
          expect(Buffer.from(unpacked.get(path) as Uint8Array)).toEqual(Buffer.from(content));
        }
      },
    ),
    { numRuns: 200 },
  );
});

it("archives of other programs read: folders, stored files, sizes behind the data, Unix modes", () => {
  const rows: Row[] = [
    { name: "heads/", unix: 0o040755 },
    { name: "heads/a.note", content: bytes("stored"), unix: 0o100644 },
    { name: "b.txt", content: bytes("deflated behind"), deflate: true, sizesFollow: true },
  ];
  const files = unpackFiles(zipOf(rows));
  expect([...files.keys()]).toEqual(["heads/a.note", "b.txt"]);
  expect(new TextDecoder().decode(files.get("b.txt"))).toBe("deflated behind");
});

describe("a hostile archive is refused with its reason", () => {
  const one = (row: Partial<Row>) => zipOf([{ name: "a.txt", content: bytes("a"), ...row }]);

  it.each([
    [
      "a path upwards",
      one({ name: "../a.txt" }),
      '"../a.txt": found a name that is not allowed: the path leaves',
    ],
    ["a path upwards inside", one({ name: "heads/../../a.txt" }), "the path leaves the folder"],
    ["a path from the root", one({ name: "/etc/passwd" }), "the path leaves the folder"],
    ["a path on a drive", one({ name: "C:/a.txt" }), "the path leaves the folder"],
    ["a path by backslashes", one({ name: "..\\a.txt" }), "names are made of"],
    ["a path of one dot", one({ name: "./a.txt" }), "the path leaves the folder"],
    ["a name with a NUL", one({ name: "a.txt\u0000.sh" }), "names are made of"],
    ["a name with a newline", one({ name: "a\n.txt" }), "names are made of"],
    ["a hidden name", one({ name: ".git/config" }), "names are made of"],
    ["an empty step", one({ name: "heads//a" }), "names are made of"],
    ["no name", one({ name: "" }), "1 to 200 characters"],
    ["a name past any use", one({ name: "a".repeat(201) }), "1 to 200 characters"],
    ["a symbolic link", one({ unix: 0o120777 }), "a.txt: found a symbolic link"],
    ["a device", one({ unix: 0o060644 }), "a.txt: found a special file"],
    ["a folder that isn't", one({ name: "heads/", content: bytes("x") }), "a folder with content"],
    ["encryption", one({ flags: 1 }), "a.txt: found encryption"],
    ["another compression", one({ method: 12 }), "a.txt: found compression method 12"],
    [
      "a checksum that isn't",
      one({ crc: 1 }),
      "a.txt: found bytes that differ from their checksum",
    ],
    ["a header with another name", one({ headerName: "b.txt" }), "a header that differs"],
    ["a header with another size", one({ headerBytes: 2 }), "a header that differs"],
    [
      "other sizes behind the data",
      one({ sizesFollow: true, descriptorBytes: 9 }),
      "sizes behind the data",
    ],
    [
      "content longer than declared",
      one({ deflate: true, content: bytes("aaaaaaaaaa"), bytes: 5 }),
      "a.txt: found 6 bytes where 5 are declared",
    ],
    [
      "content shorter than declared",
      one({ deflate: true, content: bytes("aaaaa"), bytes: 10 }),
      "a.txt: found 5 bytes where 10 are declared",
    ],
    [
      "compressed bytes that aren't",
      one({ method: 8, content: Uint8Array.of(0xff, 0xff, 0xff) }),
      "a.txt: found compressed bytes that don't unpack",
    ],
    [
      "a name twice",
      zipOf([
        { name: "a", content: bytes("1") },
        { name: "a", content: bytes("2") },
      ]),
      "a: found the name twice",
    ],
    [
      "a name twice but for its capitals",
      zipOf([{ name: "readme.md" }, { name: "README.md" }]),
      "README.md: found the name twice",
    ],
    [
      "two files that share their bytes",
      zipOf([
        { name: "a", content: bytes("1") },
        { name: "b", content: bytes("1"), headerAt: 0 },
      ]),
      "found bytes outside of any file, or shared ones",
    ],
    [
      "bytes before the first file",
      concat(bytes("#!/bin/sh\n"), plain),
      "bytes between the directory and its end",
    ],
    ["bytes after the end", concat(plain, bytes("x")), "no end of a ZIP directory"],
    ["an end cut off", plain.slice(0, -1), "no end of a ZIP directory"],
    ["nothing at all", new Uint8Array(0), "no end of a ZIP directory"],
    ["another file", bytes("not a zip, but long enough to be one"), "no end of a ZIP directory"],
  ])("%s", (_, archive, message) => {
    expect(() => unpackFiles(archive)).toThrow(message);
  });
});

describe("sizes past the limits are refused before anything is unpacked", () => {
  it.each([
    ["the archive", { archiveBytes: 10 }, "found an archive of"],
    ["a file", { fileBytes: 449 }, "README.md of 450 bytes; allowed is at most 449"],
    ["all files", { totalBytes: 456 }, "found 457 bytes unpacked; allowed is at most 456"],
    ["the number of files", { files: 2 }, "found 3 files"],
  ])("%s", (_, limits, message) => {
    expect(unpackFiles(plain).size).toBe(3);
    expect(() => unpackFiles(plain, { ...ZIP_LIMITS, ...limits })).toThrow(message);
  });

  it("a bomb: 64 MiB of zeros in some 64 KiB", () => {
    const bomb = zipSync({ "a.txt": new Uint8Array(64 * 2 ** 20) }, { level: 9 });
    expect(bomb.length).toBeLessThan(70_000);
    expect(() => unpackFiles(bomb)).toThrow("allowed is at most 500 to 1");
  });

  it("a declared size of 4 GiB allocates nothing", () => {
    const huge = zipOf([{ name: "a.txt", content: bytes("a"), bytes: 0xfffffffe }]);
    expect(() => unpackFiles(huge)).toThrow("a.txt of 4294967294 bytes");
  });
});

it("any one byte changed is refused, or leaves the files as they were", () => {
  const before = [...unpackFiles(plain)].map(([path, content]) => [path, Buffer.from(content)]);
  let refused = 0;
  for (let at = 0; at < plain.length; at += 1) {
    const changed = plain.map((byte, index) => (index === at ? byte ^ 0x55 : byte));
    try {
      const after = [...unpackFiles(changed)].map(([path, content]) => [
        path,
        Buffer.from(content),
      ]);
      expect(after).toEqual(before);
    } catch (error) {
      if ((error as Error).name !== "AuditError") throw error;
      refused += 1;
    }
  }
  expect(refused).toBeGreaterThan(plain.length / 2);
});
