import { randomBytes } from "node:crypto";
import {
  accessSync,
  constants,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
} from "node:fs";
import { open, readdir, rename, rm } from "node:fs/promises";
import path from "node:path";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHead } from "@weighhouse/ledger/tree-head";
import { StoreError } from "./store-error";

/**
 * The last signed head of each ledger, kept outside the database: `heads/<ledger>/<size>.note` beside
 * the keys. A database restored from a backup is behind it, and could else go on as if what came
 * after the backup had never been.
 *
 * Several processes may write: a head is a file named for its size, written whole before it gets that
 * name, and the largest counts; smaller ones are taken away after it is there.
 */
export class KeptHeads {
  readonly #folder: string;
  readonly #last = new Map<string, TreeHead>();

  /** @throws {StoreError} `bad-keys` where the folder can't be written or holds something else */
  constructor(keysFolder: string) {
    this.#folder = path.join(keysFolder, "heads");
    requireWritable(this.#folder);
    for (const name of readdirSync(this.#folder)) {
      const head = largestOf(path.join(this.#folder, name));
      if (head !== null) this.#last.set(head.origin, head);
    }
  }

  /** The last heads of all ledgers, as far as this process knows. */
  all(): TreeHead[] {
    return [...this.#last.values()];
  }

  /** @returns null where no head of that ledger was ever kept here */
  last(ledger: string): TreeHead | null {
    return this.#last.get(ledger) ?? null;
  }

  /** Keeps the note of a head that is committed. */
  async keep(note: string): Promise<void> {
    const head = parseTreeHead(note);
    if ((this.last(head.origin)?.size ?? -1) < head.size) this.#last.set(head.origin, head);
    const folder = path.join(this.#folder, encodeURIComponent(head.origin));
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    const draft = path.join(folder, `${randomBytes(8).toString("hex")}.part`);
    const file = await open(draft, "wx", 0o600);
    try {
      await file.writeFile(note);
      await file.sync();
    } finally {
      await file.close();
    }
    await rename(draft, path.join(folder, nameOf(head.size)));
    const smaller = (await readdir(folder)).filter(
      (name) => (sizeOf(name) ?? head.size) < head.size,
    );
    await Promise.all(smaller.map((name) => rm(path.join(folder, name), { force: true })));
  }

  /** Puts a ledger's heads aside, into `heads/<ledger>.given-up-<size>`: they stay to be compared. */
  giveUp({ origin, size }: TreeHead): void {
    const folder = path.join(this.#folder, encodeURIComponent(origin));
    let aside = `${folder}.given-up-${size}`;
    while (existsSync(aside)) aside += "-again";
    renameSync(folder, aside);
    this.#last.delete(origin);
  }
}

const nameOf = (size: number) => `${String(size).padStart(16, "0")}.note`;

function sizeOf(name: string): number | null {
  const digits = /^(\d{16})\.note$/.exec(name)?.[1];
  return digits === undefined ? null : Number(digits);
}

function requireWritable(folder: string): void {
  try {
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    accessSync(folder, constants.W_OK | constants.X_OK);
  } catch (cause) {
    throw new StoreError(
      "bad-keys",
      `WEIGHHOUSE_KEYS: found ${folder}, which can't be written to; allowed is a folder where each process that signs may keep the last heads`,
      { cause },
    );
  }
}

function largestOf(folder: string): TreeHead | null {
  if (folder.includes(".given-up-")) return null;
  const name = readdirSync(folder)
    .filter((each) => sizeOf(each) !== null)
    .sort()
    .at(-1);
  if (name === undefined) return null;
  const file = path.join(folder, name);
  try {
    return parseTreeHead(readFileSync(file, "utf8"));
  } catch (cause) {
    if (!(cause instanceof LedgerError)) throw cause;
    throw new StoreError("bad-keys", `WEIGHHOUSE_KEYS: found no signed head in ${file}`, { cause });
  }
}
