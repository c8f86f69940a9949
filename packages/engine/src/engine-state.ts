import type { Frame } from "./frame";
import type { Sums } from "./sums";
import type { Tally } from "./tally";

/** What the engine keeps between measurements; its fields are the engine's own. */
export interface EngineState {
  readonly frame: Frame;
  readonly sums: Sums;
  readonly tally: Tally;
}
