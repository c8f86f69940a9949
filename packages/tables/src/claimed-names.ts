import { fieldOfName, isTimeName } from "./field-names";
import { partNames } from "./part-names";
import { readTimeWords } from "./time-words";

/** Whether a column of this name is read as nothing but an extra, whole and under that very name. */
export function isUnclaimed(name: string): boolean {
  return (
    fieldOfName(name) === null &&
    !isTimeName(name) &&
    readTimeWords(name) === null &&
    partNames(name).length === 0 &&
    !/[[\])(]|^(?:extra|conditions?)\.|^\s|\s$|^column \d+$/.test(name)
  );
}
