/** What the store needs of a logger; pino's is one. */
export type Log = {
  info(fields: object, message: string): void;
  warn(fields: object, message: string): void;
  error(fields: object, message: string): void;
};

export const silentLog: Log = { info: () => {}, warn: () => {}, error: () => {} };
