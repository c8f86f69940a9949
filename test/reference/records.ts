import values from "./values.json";

export interface ReferenceRecord<Expected, Inputs> {
  id: string;
  source: string;
  status: "confirmed" | "computed" | "memory";
  inputs: Inputs;
  expected: Expected;
}

/** A record of values.json, with the shape that its reader knows it to have. */
export function record<Expected, Inputs = unknown>(id: string): ReferenceRecord<Expected, Inputs> {
  const found = values.records.find((one) => one.id === id);
  if (found === undefined) throw new Error(`no record ${id} in values.json`);
  return found as unknown as ReferenceRecord<Expected, Inputs>;
}

/** |found / expected - 1|; the plain difference where 0 is expected. */
export function relative(found: number, expected: number): number {
  return expected === 0 ? Math.abs(found) : Math.abs(found / expected - 1);
}
