import { readFileSync } from "node:fs";
import path from "node:path";

export type ServerFile = { pid: number; port: number; status: string };

/**
 * What a server says of itself in its data folder (`postmaster.pid`): process, port, state. Read,
 * never deleted: PostgreSQL alone can tell a stale one from a live one.
 */
export function readServerFile(dataFolder: string): ServerFile | null {
  let lines: string[];
  try {
    lines = readFileSync(path.join(dataFolder, "postmaster.pid"), "utf8").split("\n");
  } catch {
    return null;
  }
  const pid = Number(lines[0]);
  const port = Number(lines[3]);
  if (!Number.isInteger(pid) || pid <= 1) return null;
  return { pid, port: Number.isInteger(port) ? port : 0, status: (lines[7] ?? "").trim() };
}

export function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === "EPERM";
  }
}
