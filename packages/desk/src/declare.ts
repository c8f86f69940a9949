import * as z from "zod";
import { payloadSchemas } from "@weighhouse/campaign/entries";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { measurandOf, refuseTaken } from "./declared-parts";
import type { DeclaredField } from "./declared-parts";
import type { NewEntry } from "./document-after";
import { parseInput } from "./parse-input";
import { recordEntries } from "./record-entries";

const key = z.string();

export const declareObservableInput = z.strictObject({
  key,
  observable: payloadSchemas["observable.declared"],
});
export const declareMeasurandInput = z.strictObject({
  key,
  measurand: payloadSchemas["measurand.declared"],
});
export const amendMeasurandInput = z.strictObject(declareMeasurandInput.shape);
export const declareDerivedInput = z.strictObject({
  key,
  derived: payloadSchemas["derived.declared"],
});
export const declareSharedErrorInput = z.strictObject({
  key,
  sharedError: payloadSchemas["shared-error.declared"],
});
export const declareFacilityInput = z.strictObject({
  key,
  facility: payloadSchemas["facility.declared"],
});

/** Declares a kind of quantity: its unit and its scale. */
export async function declareObservable(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof declareObservableInput>,
): Promise<Appended> {
  const { key, observable } = parseInput(declareObservableInput, input);
  return declare(desk, actor, key, {
    entry: { kind: "observable.declared", payload: observable },
    field: { list: "observables", key: observable.key, pointer: "/observable" },
  });
}

/** Declares a particular quantity under stated conditions, with its reference. */
export async function declareMeasurand(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof declareMeasurandInput>,
): Promise<Appended> {
  const { key, measurand } = parseInput(declareMeasurandInput, input);
  return declare(desk, actor, key, {
    entry: { kind: "measurand.declared", payload: measurand },
    field: { list: "measurands", key: measurand.key, pointer: "/measurand" },
  });
}

/**
 * Declares a measurand anew: whole before its first measurement, only its title afterwards. What was
 * predicted of it stands.
 */
export async function amendMeasurand(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof amendMeasurandInput>,
): Promise<Appended> {
  const { key, measurand } = parseInput(amendMeasurandInput, input);
  const access = await enter(desk, actor, key, "declare");
  const field = { list: "measurands", key: measurand.key, pointer: "/measurand" } as const;
  const stored = await recordEntries(desk, access, ({ document }) => {
    measurandOf(document, measurand.key);
    return { entries: [{ kind: "measurand.declared", payload: measurand }], fields: [field] };
  });
  return appended(key, stored);
}

/** Declares a quantity computed from measurands. */
export async function declareDerived(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof declareDerivedInput>,
): Promise<Appended> {
  const { key, derived } = parseInput(declareDerivedInput, input);
  return declare(desk, actor, key, {
    entry: { kind: "derived.declared", payload: derived },
    field: { list: "derived", key: derived.key, pointer: "/derived" },
  });
}

/** Declares a systematic effect that several measurements have in common. */
export async function declareSharedError(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof declareSharedErrorInput>,
): Promise<Appended> {
  const { key, sharedError } = parseInput(declareSharedErrorInput, input);
  return declare(desk, actor, key, {
    entry: { kind: "shared-error.declared", payload: sharedError },
    field: { list: "sharedErrors", key: sharedError.key, pointer: "/sharedError" },
  });
}

/** Declares an instrument or a place that measurements come from. */
export async function declareFacility(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof declareFacilityInput>,
): Promise<Appended> {
  const { key, facility } = parseInput(declareFacilityInput, input);
  return declare(desk, actor, key, {
    entry: { kind: "facility.declared", payload: facility },
    field: { list: "facilities", key: facility.key, pointer: "/facility" },
  });
}

async function declare(
  desk: Desk,
  actor: Actor,
  campaign: string,
  declaration: { entry: NewEntry; field: DeclaredField },
): Promise<Appended> {
  const access = await enter(desk, actor, campaign, "declare");
  const stored = await recordEntries(desk, access, ({ document }) => {
    refuseTaken(document, declaration.field);
    return { entries: [declaration.entry], fields: [declaration.field] };
  });
  return appended(campaign, stored);
}
