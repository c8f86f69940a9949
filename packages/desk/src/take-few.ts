import type { TellProgress } from "./posted-rows";
import type { ReadRows } from "./read-rows";
import type { Piece } from "./stage-lines";

/** Rows that are all held at once; of more only a piece is, and the database has the others. */
const FEW = 1000;

/**
 * The rows, where they are few.
 *
 * @returns `rest` with all pieces, also those seen, where there are more; null where there are not
 */
export async function takeFew(
  pieces: AsyncIterable<Piece>,
  tell: TellProgress,
): Promise<{ rows: ReadRows["rows"]; rest: AsyncIterable<Piece> | null; bytes: number }> {
  const iterator = pieces[Symbol.asyncIterator]();
  const rows: ReadRows["rows"] = [];
  const taken: Piece[] = [];
  let bytes = 0;
  while (taken.reduce((sum, piece) => sum + piece.rows.length, 0) <= FEW) {
    const { done, value } = await iterator.next();
    if (done) {
      for (const piece of taken) for (const row of piece.rows) rows.push(row);
      return { rows, rest: null, bytes };
    }
    taken.push(value);
    bytes = value.bytes;
    tell({ stage: "read", rows: value.rows.length, bytes });
  }
  return { rows, rest: all(taken, iterator), bytes };
}

async function* all(taken: Piece[], iterator: AsyncIterator<Piece>): AsyncGenerator<Piece> {
  try {
    // Let go of as they are given away: these are a good part of what is held.
    for (let piece = taken.shift(); piece !== undefined; piece = taken.shift()) yield piece;
    for (let next = await iterator.next(); !next.done; next = await iterator.next()) {
      yield next.value;
    }
  } finally {
    await iterator.return?.();
  }
}

/** No row at all is a problem of the whole. */
export function noneRefused(rows: unknown[], problems: ReadRows["problems"]): ReadRows["problems"] {
  if (rows.length > 0 || problems.length > 0) return problems;
  return [{ line: null, column: null, found: "no row", allowed: "one measurement or more" }];
}
