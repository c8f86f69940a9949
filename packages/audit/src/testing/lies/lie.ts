import type { CheckName } from "../../checks/line";

/** An archive made of a good one, named for the lie that it tells. */
export type Lie = {
  name: string;
  /** The line that must fail, and what it must say. */
  check: CheckName;
  reason: string;
  make: () => Uint8Array;
};
