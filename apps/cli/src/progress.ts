/** Nothing is said of what is done within a second. */
const QUIET_MS = 1000;
const TERMINAL_EVERY_MS = 100;
const FILE_EVERY_MS = 10_000;

export interface Progress {
  report: (done: number, total: number) => void;
  /** Takes its line away again. */
  end: () => void;
}

/** How far long work is, on stderr: one line that is written over, in a file one every ten seconds. */
export function progressOf(what: string): Progress {
  const terminal = process.stderr.isTTY === true;
  const started = performance.now();
  let last = started + QUIET_MS - (terminal ? TERMINAL_EVERY_MS : FILE_EVERY_MS);
  let shown = false;
  return {
    report: (done, total) => {
      const now = performance.now();
      const every = terminal ? TERMINAL_EVERY_MS : FILE_EVERY_MS;
      if (now - last < every || now - started < QUIET_MS) return;
      last = now;
      shown = true;
      const line = `${what}: ${done} of ${total}`;
      process.stderr.write(terminal ? `\r${line}\u001b[K` : `${line}\n`);
    },
    end: () => {
      if (shown && terminal) process.stderr.write("\r\u001b[K");
    },
  };
}
