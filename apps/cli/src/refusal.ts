/** 0 done and good; 1 the document or the archive is not valid; 2 wrong usage; 3 the server. */
export type ExitCode = 0 | 1 | 2 | 3;

/** Ends the command: its lines go to stderr, one error a line. */
export class Refusal extends Error {
  readonly exitCode: ExitCode;
  readonly lines: readonly string[];

  constructor(exitCode: Exclude<ExitCode, 0>, lines: readonly string[], options?: ErrorOptions) {
    super(lines.join("\n"), options);
    this.name = "Refusal";
    this.exitCode = exitCode;
    this.lines = lines;
  }
}

export function wrongUsage(line: string): Refusal {
  return new Refusal(2, [line]);
}
