import { readFileSync, statSync } from "node:fs";
import path from "node:path";
import { StoreError } from "../store-error";

/** Whom the server runs as: null, this process's own user; else another, because PostgreSQL refuses root. */
export type ServerUser = { uid: number; gid: number } | null;

/**
 * Root hands the server to an unprivileged user that the system knows: the owner of the data that is
 * there, else `postgres`, else `nobody`.
 */
export function serverUser(dataFolder: string): ServerUser {
  if (process.getuid?.() !== 0) return null;
  const owner = statSync(dataFolder, { throwIfNoEntry: false });
  if (owner !== undefined && owner.uid !== 0) return { uid: owner.uid, gid: owner.gid };
  const users = readFileSync("/etc/passwd", "utf8")
    .split("\n")
    .map((line) => line.split(":"));
  for (const name of ["postgres", "nobody"]) {
    const found = users.find((fields) => fields[0] === name);
    if (found !== undefined) return { uid: Number(found[2]), gid: Number(found[3]) };
  }
  throw new StoreError(
    "embedded-failed",
    "found root and neither a user postgres nor nobody; PostgreSQL refuses to run as root",
  );
}

/** Every folder above the data must let the server's user pass. */
export function requireReachable(folder: string, user: ServerUser): void {
  if (user === null) return;
  for (let above = folder; ; above = path.dirname(above)) {
    const { mode, uid, gid } = statSync(above);
    const passes = uid === user.uid ? 0o100 : gid === user.gid ? 0o010 : 0o001;
    if ((mode & passes) === 0) {
      throw new StoreError(
        "embedded-failed",
        `WEIGHHOUSE_HOME: found ${folder}, where user ${user.uid}, as whom PostgreSQL runs, can't pass ${above}; allowed is a folder that every user can reach, such as /var/lib/weighhouse`,
      );
    }
    if (above === path.dirname(above)) return;
  }
}
