import type { TableChoices } from "@weighhouse/tables/table-match";

export const noChoices: TableChoices = {
  columns: {},
  units: {},
  times: {},
  decimal: null,
  limits: null,
};

/** What was chosen here, over what is remembered. */
export function mergedChoices(own: TableChoices, remembered: TableChoices | null): TableChoices {
  if (remembered === null) return own;
  return {
    columns: { ...remembered.columns, ...own.columns },
    units: { ...remembered.units, ...own.units },
    times: { ...remembered.times, ...own.times },
    decimal: own.decimal ?? remembered.decimal,
    limits: own.limits ?? remembered.limits,
  };
}
