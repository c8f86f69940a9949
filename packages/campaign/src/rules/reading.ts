import type { DerivedForm, DocumentForm, Measurand, Observable } from "../document";
import type { SharedError } from "../document";
import type { Legible } from "../form";
import type { Problem, ProblemCode } from "../problem";

/** A key that may not have been readable: such a one is complained of once, at its own place. */
type Keyed = { key?: string | undefined } | undefined;

/**
 * A document while its rules are checked: what was legible of it, an index by key of what other
 * parts refer to, and the problems so far. `undefined` stands for what could not be read; rules
 * pass over it, since its own problem is already on the list.
 */
export class Reading {
  readonly observables: ReadonlyMap<string, Legible<Observable>>;
  readonly measurands: ReadonlyMap<string, Legible<Measurand>>;
  readonly derived: ReadonlyMap<string, Legible<DerivedForm>>;
  readonly sharedErrors: ReadonlyMap<string, Legible<SharedError>>;
  readonly facilities: ReadonlySet<string>;
  readonly teams: ReadonlySet<string>;
  /** For trying expressions: a second or two. */
  readonly effort = { left: 5e7 };

  constructor(
    readonly form: Legible<DocumentForm>,
    readonly problems: Problem[],
  ) {
    this.observables = byKey(form.observables);
    this.measurands = byKey(form.measurands);
    this.derived = byKey(form.derived);
    this.sharedErrors = byKey(form.sharedErrors);
    this.facilities = new Set(byKey(form.facilities).keys());
    this.teams = new Set(byKey(form.teams).keys());
  }

  refuse(pointer: string, code: ProblemCode, found: string, allowed: string): void {
    this.problems.push({ pointer, code, found, allowed });
  }

  /** Refuses a key that none of the known ones is. */
  refer(
    pointer: string,
    key: string | null | undefined,
    known: { has(key: string): boolean; keys(): Iterable<string> },
    noun: string,
  ): void {
    if (key === null || key === undefined || known.has(key)) return;
    this.refuse(pointer, "unknown-key", `the unknown ${noun} ${key}`, oneOf(known.keys(), noun));
  }

  /** Refuses a key that stands earlier in the same list. */
  distinct(pointer: string, key: string | undefined, earlier: Set<string>, noun: string): void {
    if (key === undefined) return;
    if (earlier.has(key)) {
      this.refuse(pointer, "duplicate", `${noun} ${key} a second time`, "each key once");
    }
    earlier.add(key);
  }

  /** The observable of a measurand or a derived value, by that one's key. */
  observableOf(key: string | undefined): Legible<Observable> | undefined {
    if (key === undefined) return undefined;
    const of = this.measurands.get(key) ?? this.derived.get(key);
    return of?.observable === undefined ? undefined : this.observables.get(of.observable);
  }

  /** Everything that a hypothesis can predict. */
  predictable(): ReadonlyMap<string, unknown> {
    return new Map<string, unknown>([...this.measurands, ...this.derived]);
  }
}

/** The elements of a list that could be read, each with its index. */
export function* legible<T>(list: readonly (T | undefined)[] | undefined): Generator<[number, T]> {
  for (const [index, item] of (list ?? []).entries()) if (item !== undefined) yield [index, item];
}

/** Choices in words, short enough for a line. */
export function oneOf(keys: Iterable<string>, noun: string): string {
  const all = [...keys];
  if (all.length === 0) return `no ${noun}: none is declared`;
  return all.length > 12 ? `${all.slice(0, 12).join(", ")}, … (${all.length})` : all.join(", ");
}

function byKey<T extends Keyed>(list: readonly T[] | undefined): Map<string, NonNullable<T>> {
  const index = new Map<string, NonNullable<T>>();
  for (const [, item] of legible(list)) {
    const key = (item as Keyed)?.key;
    if (key !== undefined && !index.has(key)) index.set(key, item as NonNullable<T>);
  }
  return index;
}
