/** Whether a time of a document lies behind us, by this machine's clock; never, where none is set. */
export function hasPassed(time: string | null): boolean {
  return time !== null && Date.parse(time) <= Date.now();
}
