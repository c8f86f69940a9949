/** What a table may hold at most: past it a file is refused before any row is read. */
export const MAX_BYTES = 64 * 1024 * 1024;
export const MAX_CHARACTERS = 64 * 1024 * 1024;
/** Letters of one line. */
export const MAX_LINE = 1024 * 1024;
export const MAX_ROWS = 250_000;
export const MAX_COLUMNS = 200;
/** Of all rows together. */
export const MAX_CELLS = 16_000_000;
/** Letters of one cell. */
export const MAX_CELL = 65_536;
