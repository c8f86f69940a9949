import { zipSync } from "fflate";
import { writeArchive } from "../../write";
import { unpackFiles } from "../../zip/read";
import { archiveInput } from "../marsh-campaign";
import { concat, zipOf } from "../zip-of";
import type { Row } from "../zip-of";
import type { Lie } from "./lie";

const archive = writeArchive(archiveInput());
const files: Row[] = [...unpackFiles(archive)].map(([name, content]) => ({
  name,
  content,
  deflate: true,
}));

const text = (characters: string) => new TextEncoder().encode(characters);
const withRow = (row: Row) => () => zipOf([...files, row]);
/** The good archive with the README's row told otherwise. */
const readme = (change: Partial<Row>) => () =>
  zipOf(files.map((row) => (row.name === "README.md" ? { ...row, ...change } : row)));

type Row3 = [name: string, make: () => Uint8Array, reason: string];

/** Containers that unpack one way here and another way there, or out of their folder, or for ever. */
const rows: Row3[] = [
  ["a path upwards", withRow({ name: "../run.sh" }), "the path leaves the folder"],
  ["a path upwards inside", withRow({ name: "heads/../../run.sh" }), "the path leaves the folder"],
  ["a path from the root", withRow({ name: "/etc/cron.d/run" }), "the path leaves the folder"],
  ["a path on a drive", withRow({ name: "C:/run.bat" }), "the path leaves the folder"],
  ["a path by backslashes", withRow({ name: "..\\run.bat" }), "names are made of"],
  ["a hidden file", withRow({ name: ".bashrc" }), "names are made of"],
  ["a name with a NUL", withRow({ name: "README.md\u0000.sh" }), "names are made of"],
  [
    "a symbolic link",
    withRow({ name: "keys/link.pub", content: text("/etc/passwd"), unix: 0o120777 }),
    "keys/link.pub: found a symbolic link",
  ],
  ["a device", withRow({ name: "device", unix: 0o020666 }), "device: found a special file"],
  [
    "a name twice",
    withRow({ name: "README.md", content: text("other") }),
    "README.md: found the name twice",
  ],
  [
    "a name twice but for its capitals",
    withRow({ name: "readme.MD", content: text("other") }),
    "readme.MD: found the name twice",
  ],
  [
    "a name in the header that differs",
    readme({ headerName: "READYOU.md" }),
    "a header that differs",
  ],
  ["a size in the header that differs", readme({ headerBytes: 7 }), "a header that differs"],
  [
    "a checksum that isn't",
    readme({ crc: 1 }),
    "README.md: found bytes that differ from their checksum",
  ],
  ["content longer than declared", readme({ bytes: 10 }), "README.md: found 11 bytes where 10"],
  ["encryption", readme({ flags: 1 }), "README.md: found encryption"],
  [
    "a compression nobody expects",
    readme({ method: 14 }),
    "README.md: found compression method 14",
  ],
  ["a file that shares another's bytes", withRow({ name: "again.md", headerAt: 0 }), "shared ones"],
  [
    "a bomb of 64 MiB in 64 kB",
    () => zipSync({ "README.md": new Uint8Array(64 * 2 ** 20) }, { level: 9 }),
    "allowed is at most 500 to 1",
  ],
  [
    "a file of 4 GiB, by its own word",
    readme({ bytes: 0xfffffffe }),
    "README.md of 4294967294 bytes",
  ],
  ["a program before the archive", () => concat(text("#!/bin/sh\n"), archive), "64-bit sizes"],
  ["bytes after the archive", () => concat(archive, text("x")), "no end of a ZIP directory"],
  ["an archive cut off", () => archive.slice(0, -9), "no end of a ZIP directory"],
  ["another count of files in the end", () => changed(-12, 1), "a part of several"],
  ["a comment", () => changed(-2, 1), "a comment"],
  [
    "no archive at all",
    () => text("All is well, believe me. Nothing to see here."),
    "no end of a ZIP",
  ],
];

export const liesOfContainer: Lie[] = rows.map(([name, make, reason]) => ({
  name,
  check: "container",
  reason,
  make,
}));

/** The archive with one byte, counted from its end, replaced. */
function changed(at: number, by: number): Uint8Array {
  const bytes = archive.slice();
  const place = bytes.length + at;
  bytes[place] = (bytes[place] as number) ^ by;
  return bytes;
}
