import type {
  ConditionalNode,
  ConstantNode,
  FunctionNode,
  MathNode,
  OperatorNode,
  ParenthesisNode,
  SymbolNode,
} from "mathjs";
import type { Prediction, Table } from "./document";
import { parseText } from "./expression-parser";
import { place, tokensOf } from "./expression-tokens";
import type { Fault, Token } from "./expression-tokens";
import { constants, functions, TABLE } from "./expression-words";
import { interpolate } from "./interpolation";

export type Scope = Readonly<Record<string, number>>;

/** `names`: those of the scope that it uses. `tables`: those that it looks values up in. */
export type Expression = {
  evaluate(scope: Scope): number;
  names: ReadonlySet<string>;
  tables: ReadonlySet<string>;
};

/** What an expression may name. */
export type Vocabulary = {
  names: ReadonlySet<string>;
  tables?: ReadonlyMap<string, Pick<Table, "at" | "values">>;
};

export type Compiled = { ok: true; expression: Expression } | { ok: false; faults: Fault[] };

type Evaluate = (scope: Scope) => number;

/**
 * Compiles an expression of the campaign format to closures of our own.
 *
 * Allowed: numbers, names, + - * / ^ (from the right, before unary minus), parentheses, unary
 * minus, a comparison as the condition of ? :, the functions and constants of the format and
 * `table(key, x[, y])`. At most 2,000 characters, 64 parentheses deep, 400 nodes.
 *
 * The value is NaN or infinite where the mathematics is (a root of a negative number, a division by zero) and
 * NaN outside a table.
 */
export function compileExpression(text: string, vocabulary: Vocabulary): Compiled {
  const tokens = tokensOf(text);
  if (!Array.isArray(tokens)) return { ok: false, faults: [tokens] };
  if (tokens.length === 0) return fault("an empty text", "an expression");
  const tree = parse(tokens);
  if ("found" in tree) return { ok: false, faults: [tree] };
  const compiler = new Compiler(vocabulary);
  const evaluate = compiler.compile(tree.node);
  if (compiler.faults.length > 0) return { ok: false, faults: compiler.faults };
  const { names, tables } = compiler;
  return { ok: true, expression: { evaluate, names, tables } };
}

/**
 * The value of a prediction's `expected` where it is a number or an expression without names of
 * the hypothesis: what an engine needs no parameters and no conditions for.
 *
 * @returns null where nothing is expected, or its value hangs on names
 */
export function constantExpected(
  prediction: Pick<Prediction, "expected">,
  tables: readonly Table[] = [],
): number | null {
  const { expected } = prediction;
  if (typeof expected !== "string") return expected;
  const compiled = compileExpression(expected, {
    names: new Set(),
    tables: new Map(tables.map((table) => [table.key, table])),
  });
  return compiled.ok ? compiled.expression.evaluate({}) : null;
}

function fault(found: string, allowed: string): { ok: false; faults: Fault[] } {
  return { ok: false, faults: [{ found, allowed }] };
}

/**
 * Parses what the tokens say. Names get a mark in front, so that none of them is a word of the
 * parser's own (`to`, `in`, `mod`, `true`), and numbers are written plainly.
 */
function parse(tokens: Token[]): { node: MathNode } | Fault {
  const origins: number[] = [];
  let text = "";
  for (const token of tokens) {
    if (token.kind === "number" && !Number.isFinite(Number(token.text))) {
      return { found: `the number ${token.text} ${place(token.at)}`, allowed: "a finite number" };
    }
    const written = token.kind === "name" ? `_${token.text}` : plain(token);
    for (let i = 0; i <= written.length; i++) origins.push(token.at);
    text += `${written} `;
  }
  try {
    return { node: parseText(text) };
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    const char = (error as SyntaxError & { char?: number }).char ?? text.length;
    const at = origins[char - 1];
    const where = at === undefined || char > text.trimEnd().length ? "at the end" : place(at);
    return { found: `a text that doesn't parse ${where}`, allowed: "an expression of the format" };
  }
}

function plain(token: Token): string {
  return token.kind === "number" ? String(Number(token.text)) : token.text;
}

/** Walks the parser's tree; whatever isn't on its list is a fault. */
class Compiler {
  readonly faults: Fault[] = [];
  readonly names = new Set<string>();
  readonly tables = new Set<string>();

  constructor(readonly vocabulary: Vocabulary) {}

  compile(node: MathNode): Evaluate {
    switch (node.type) {
      case "ConstantNode":
        return this.number(node as ConstantNode);
      case "SymbolNode":
        return this.name((node as SymbolNode).name.slice(1));
      case "ParenthesisNode":
        return this.compile((node as ParenthesisNode).content);
      case "OperatorNode":
        return this.operation(node as OperatorNode);
      case "ConditionalNode":
        return this.choice(node as ConditionalNode);
      case "FunctionNode":
        return this.call(node as FunctionNode);
      case "RelationalNode":
        return this.refuse("a chain of comparisons", "one comparison with ? :");
      default:
        return this.refuse(`${node.type} in the expression`, "what the format names");
    }
  }

  private number(node: ConstantNode): Evaluate {
    const value: unknown = node.value;
    if (typeof value !== "number") return this.refuse(String(value), "a number");
    return () => value;
  }

  private name(name: string): Evaluate {
    const constant = constants.get(name);
    if (constant !== undefined) return () => constant;
    if (this.vocabulary.names.has(name)) {
      this.names.add(name);
      return (scope) => scope[name] ?? Number.NaN;
    }
    if (functions.has(name) || name === TABLE) {
      return this.refuse(`the function ${name} without its values`, `${name}(…)`);
    }
    const known = [...this.vocabulary.names, ...constants.keys()].join(", ");
    return this.refuse(`the unknown name ${name}`, known);
  }

  private operation(node: OperatorNode): Evaluate {
    if (node.implicit) return this.refuse("a multiplication without *", "a * b");
    const [first, second] = node.args as [MathNode, MathNode | undefined];
    if (second === undefined) {
      if (node.op !== "-") return this.refuse(`the sign ${node.op} in front`, "unary minus");
      const inner = this.compile(first);
      return (scope) => -inner(scope);
    }
    const a = this.compile(first);
    const b = this.compile(second);
    switch (node.op) {
      case "+":
        return (scope) => a(scope) + b(scope);
      case "-":
        return (scope) => a(scope) - b(scope);
      case "*":
        return (scope) => a(scope) * b(scope);
      case "/":
        return (scope) => a(scope) / b(scope);
      case "^":
        return (scope) => a(scope) ** b(scope);
      default:
        return this.refuse(`the comparison ${node.op}`, "a comparison only before ? :");
    }
  }

  private choice(node: ConditionalNode): Evaluate {
    const holds = this.comparison(node.condition);
    const yes = this.compile(node.trueExpr);
    const no = this.compile(node.falseExpr);
    return (scope) => (holds(scope) ? yes(scope) : no(scope));
  }

  private comparison(node: MathNode): (scope: Scope) => boolean {
    if (node.type === "ParenthesisNode") return this.comparison((node as ParenthesisNode).content);
    const { op, args } = node as OperatorNode;
    const compare = node.type === "OperatorNode" ? comparisons.get(op) : undefined;
    if (compare === undefined) {
      this.refuse("no single comparison before ?", "one comparison < <= > >= before ? :");
      return () => false;
    }
    const a = this.compile(args[0]!);
    const b = this.compile(args[1]!);
    return (scope) => compare(a(scope), b(scope));
  }

  private call(node: FunctionNode): Evaluate {
    const called = node.fn as unknown as MathNode;
    if (called.type !== "SymbolNode") return this.refuse("a call of a value", "f(x)");
    const name = (called as SymbolNode).name.slice(1);
    if (name === TABLE) return this.look(node.args);
    const callable = functions.get(name);
    if (callable === undefined) {
      const known = [...functions.keys(), TABLE].join(", ");
      return this.refuse(`the unknown function ${name}`, known);
    }
    const count = node.args.length;
    if (count < callable.least || count > callable.most) {
      const wanted = callable.most === Infinity ? "1 or more" : String(callable.least);
      return this.refuse(`${name} of ${count} values`, `${name} of ${wanted}`);
    }
    const { call } = callable;
    const values = node.args.map((argument) => this.compile(argument));
    return (scope) => call(...values.map((value) => value(scope)));
  }

  private look([first, ...rest]: MathNode[]): Evaluate {
    const known = this.vocabulary.tables ?? new Map<string, Pick<Table, "at" | "values">>();
    const key = first?.type === "SymbolNode" ? (first as SymbolNode).name.slice(1) : null;
    const table = key === null ? undefined : known.get(key);
    const at = rest.map((argument) => this.compile(argument));
    if (key === null || table === undefined) {
      const keys = known.size === 0 ? "no table: none is declared" : [...known.keys()].join(", ");
      return this.refuse(`the unknown table ${key ?? ""}`.trimEnd(), keys);
    }
    this.tables.add(key);
    if (at.length !== table.at.length) {
      const wanted = `${TABLE}(${key}, ${table.at.length === 1 ? "x" : "x, y"})`;
      return this.refuse(`${at.length} coordinates for the table ${key}`, wanted);
    }
    return (scope) =>
      interpolate(
        table,
        at.map((coordinate) => coordinate(scope)),
      );
  }

  private refuse(found: string, allowed: string): Evaluate {
    this.faults.push({ found, allowed });
    return () => Number.NaN;
  }
}

const comparisons: ReadonlyMap<string, (a: number, b: number) => boolean> = new Map([
  ["<", (a: number, b: number) => a < b],
  ["<=", (a: number, b: number) => a <= b],
  [">", (a: number, b: number) => a > b],
  [">=", (a: number, b: number) => a >= b],
]);
