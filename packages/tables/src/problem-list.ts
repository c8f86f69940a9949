import type { TableProblem } from "./table";

/** More than anybody reads; a file of the wrong kind has one in every cell. */
const MAX_PROBLEMS = 200;

/** The first problems of a file, and how many more there are. */
export class ProblemList {
  readonly #first: TableProblem[] = [];
  #more = 0;

  add(problem: TableProblem): void {
    if (this.#first.length < MAX_PROBLEMS) this.#first.push(problem);
    else this.#more += 1;
  }

  get all(): TableProblem[] {
    if (this.#more === 0) return [...this.#first];
    const found = `${this.#more} more problems like these`;
    return [...this.#first, { line: null, column: null, found, allowed: "none" }];
  }
}
