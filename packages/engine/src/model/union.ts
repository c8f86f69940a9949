/** Parts things into sets that share something: union by smaller index, with paths halved. */
export class Union {
  private readonly parent: number[] = [];

  /** A new thing, by itself. */
  add(): number {
    return this.parent.push(this.parent.length) - 1;
  }

  rootOf(one: number): number {
    let at = one;
    while (this.parent[at] !== at) {
      this.parent[at] = this.parent[this.parent[at]!]!;
      at = this.parent[at]!;
    }
    return at;
  }

  join(a: number, b: number): void {
    const [first, second] = [this.rootOf(a), this.rootOf(b)];
    this.parent[Math.max(first, second)] = Math.min(first, second);
  }
}
