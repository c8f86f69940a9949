/**
 * What a person has typed, kept in the browser until it is sent: an error, a reload or an ended
 * session loses nothing. One draft per form; another shape of the same form is thrown away.
 */
export interface DraftStorage {
  getItem(key: string): string | null;
  setItem(key: string, text: string): void;
  removeItem(key: string): void;
}

export interface Draft<Values> {
  savedAt: string;
  values: Values;
}

const prefix = "weighhouse:draft:";

export function saveDraft<Values>(
  storage: DraftStorage,
  name: string,
  draft: Draft<Values>,
): boolean {
  try {
    storage.setItem(prefix + name, JSON.stringify(draft));
    return true;
  } catch {
    // Full or forbidden storage: the form still works, the page says that nothing is kept.
    return false;
  }
}

export function readDraft<Values extends object>(
  storage: DraftStorage,
  name: string,
  shape: Values,
): Draft<Values> | null {
  try {
    const text = storage.getItem(prefix + name);
    if (text === null) return null;
    const draft: unknown = JSON.parse(text);
    if (!isRecord(draft) || typeof draft["savedAt"] !== "string") return null;
    return sameShape(draft["values"], shape)
      ? { savedAt: draft["savedAt"], values: draft["values"] as Values }
      : null;
  } catch {
    return null;
  }
}

export function clearDraft(storage: DraftStorage, name: string): void {
  try {
    storage.removeItem(prefix + name);
  } catch {
    // Forbidden storage held nothing.
  }
}

/** Whether a value has the fields of the shape, each of its type; lists compare their first item. */
function sameShape(value: unknown, shape: unknown): boolean {
  if (Array.isArray(shape))
    return (
      Array.isArray(value) &&
      (shape.length === 0 || value.every((item) => sameShape(item, shape[0])))
    );
  if (isRecord(shape))
    return (
      isRecord(value) &&
      Object.keys(shape).every((name) => name in value && sameShape(value[name], shape[name]))
    );
  return typeof value === typeof shape;
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
