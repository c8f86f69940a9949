import type { Order } from "@weighhouse/campaign/standings";
import type { Actor, Desk } from "./desk";
import { readStandings } from "./read-standings";

/** The order of each of a hypothesis's predictions, as the standings of that size have it. */
export async function ordersOf(
  desk: Desk,
  actor: Actor,
  of: { key: string; hypothesis: string; size: number },
): Promise<{ measurand: string; order: Order }[]> {
  const { standings } = await readStandings(desk, actor, { key: of.key, size: of.size });
  return standings.verdicts
    .filter(({ hypothesis }) => hypothesis === of.hypothesis)
    .map(({ measurand, order }) => ({ measurand, order }));
}
