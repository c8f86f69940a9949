import type { Roles } from "./workspace";

/** A block and what is said of it. */
export function blockKey(block: readonly number[], roles: Roles): string {
  return block.map((m) => `${m}:${roles[m]}`).join(" ");
}
