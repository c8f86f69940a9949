/**
 * Whether an uncaught error is postgres.js writing to a connection that has closed meanwhile. It
 * throws from a timer, where no caller can catch it; the query itself was refused with
 * CONNECTION_CLOSED before, and the pool has moved on, so the process can go on too. Known to its
 * maintainers (porsager/postgres issues 1154 and 1208) and not mended as of 3.4.9.
 */
export function isWriteAfterClose(error: unknown): boolean {
  return (
    error instanceof TypeError &&
    /\bnextWrite\b[^\n]*postgres\/(?:src|cjs\/src)\/connection\.js/.test(error.stack ?? "")
  );
}
