import { censoredFactor, fainterFactor, linearNoiseFactor } from "../block/factors";
import {
  ASYMMETRIC,
  EACH_FLAT,
  FACTOR,
  NORMAL,
  type BlockRows,
  type Factor,
} from "../block/problem";
import type { Row } from "./block-parts";

/** Rows as the kernel takes them, before what their parts add to them. */
export interface OpenRows extends BlockRows {
  asymmetric: { plus: Float64Array; minus: Float64Array };
  eachFlat: { lower: Float64Array; upper: Float64Array };
  factors: (Factor | null)[];
  period: Float64Array;
}

export function openRows(rows: readonly Row[]): OpenRows {
  const count = rows.length;
  const array = () => new Float64Array(count);
  return {
    count,
    observed: Float64Array.from(rows, ({ observed }) => observed),
    kind: new Uint8Array(count).fill(NORMAL),
    variance: Float64Array.from(rows, ({ variance }) => variance),
    asymmetric: { plus: array(), minus: array() },
    eachFlat: { lower: array(), upper: array() },
    factors: Array.from({ length: count }, () => null),
    period: array(),
    groups: [],
    smooth: [],
  };
}

/** What a row's reading is to the kernel. `extra` has all variance that isn't its own. */
export function setKind(
  open: OpenRows,
  i: number,
  { row, extra, centre }: { row: Row; extra: number; centre: number },
): void {
  const { told, observed } = row;
  switch (told?.form) {
    case "asymmetric":
      open.kind[i] = ASYMMETRIC;
      open.variance[i] = extra;
      open.asymmetric.plus[i] = told.plus;
      open.asymmetric.minus[i] = told.minus;
      return;
    case "censored": {
      const side = told.side === "upper" ? 1 : -1;
      open.factors[i] = censoredFactor({ limit: observed, sd: told.sd, side, extra });
      break;
    }
    case "linear-noise":
      open.factors[i] = linearNoiseFactor({ value: told.value, sd: told.sd, extra, centre });
      break;
    case "fainter":
      open.factors[i] = fainterFactor({ limit: observed, sigmas: told.sigmas, extra });
      break;
    default:
      open.variance[i] = row.variance - row.extra + extra;
      return;
  }
  open.kind[i] = FACTOR;
}

/** Leaves out what no row is of. */
export function closedRows(open: OpenRows): BlockRows {
  return {
    ...open,
    asymmetric: open.kind.includes(ASYMMETRIC) ? open.asymmetric : null,
    eachFlat: open.kind.includes(EACH_FLAT) ? open.eachFlat : null,
    factors: open.kind.includes(FACTOR) ? open.factors : null,
    period: open.period.some((period) => period > 0) ? open.period : null,
  };
}
