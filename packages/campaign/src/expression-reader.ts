import type {
  ConditionalNode,
  ConstantNode,
  FunctionNode,
  MathNode,
  OperatorNode,
  ParenthesisNode,
  SymbolNode,
} from "mathjs";
import { parseText } from "./expression-parser";
import { place } from "./expression-tokens";
import type { Fault, Token } from "./expression-tokens";
import { choice, number } from "./expression-tree";
import type { Comparison, LookUp, Operator, Tree } from "./expression-tree";
import { constants, functions, TABLE } from "./expression-words";

/** What an expression may name. */
export type Vocabulary = {
  names: ReadonlySet<string>;
  tables?: ReadonlyMap<string, LookUp>;
};

/** The tree of what the tokens say, with the tables that it looks values up in. */
export type Read =
  { ok: true; tree: Tree; tables: ReadonlySet<string> } | { ok: false; faults: Fault[] };

export function readTokens(tokens: Token[], vocabulary: Vocabulary): Read {
  const parsed = parse(tokens);
  if ("found" in parsed) return { ok: false, faults: [parsed] };
  const reader = new Reader(vocabulary);
  const tree = reader.read(parsed.node);
  const { faults, tables } = reader;
  return faults.length > 0 ? { ok: false, faults } : { ok: true, tree, tables };
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
class Reader {
  readonly faults: Fault[] = [];
  readonly tables = new Set<string>();

  constructor(readonly vocabulary: Vocabulary) {}

  read(node: MathNode): Tree {
    switch (node.type) {
      case "ConstantNode":
        return this.number(node as ConstantNode);
      case "SymbolNode":
        return this.name((node as SymbolNode).name.slice(1));
      case "ParenthesisNode":
        return this.read((node as ParenthesisNode).content);
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

  private number(node: ConstantNode): Tree {
    const value: unknown = node.value;
    if (typeof value !== "number") return this.refuse(String(value), "a number");
    return number(value);
  }

  private name(name: string): Tree {
    const constant = constants.get(name);
    if (constant !== undefined) return number(constant);
    if (this.vocabulary.names.has(name)) return { kind: "name", name };
    if (functions.has(name) || name === TABLE) {
      return this.refuse(`the function ${name} without its values`, `${name}(…)`);
    }
    const known = [...this.vocabulary.names, ...constants.keys()].join(", ");
    return this.refuse(`the unknown name ${name}`, known);
  }

  private operation(node: OperatorNode): Tree {
    if (node.implicit) return this.refuse("a multiplication without *", "a * b");
    const [first, second] = node.args as [MathNode, MathNode | undefined];
    if (second === undefined) {
      if (node.op !== "-") return this.refuse(`the sign ${node.op} in front`, "unary minus");
      return { kind: "negative", of: this.read(first) };
    }
    const a = this.read(first);
    const b = this.read(second);
    if (!operators.has(node.op)) {
      return this.refuse(`the comparison ${node.op}`, "a comparison only before ? :");
    }
    return { kind: "operation", operator: node.op as Operator, a, b };
  }

  private choice(node: ConditionalNode): Tree {
    let condition = node.condition;
    while (condition.type === "ParenthesisNode") {
      condition = (condition as ParenthesisNode).content;
    }
    const { type, op, args } = condition as OperatorNode;
    const compared = type === "OperatorNode" && comparisons.has(op);
    if (!compared) {
      this.refuse("no single comparison before ?", "one comparison < <= > >= before ? :");
    }
    const [a, b] = compared ? args.map((side) => this.read(side)) : [];
    const yes = this.read(node.trueExpr);
    const no = this.read(node.falseExpr);
    if (a === undefined || b === undefined) return number(Number.NaN);
    return choice(op as Comparison, [a, b, yes, no]);
  }

  private call(node: FunctionNode): Tree {
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
    return { kind: "call", name, values: node.args.map((argument) => this.read(argument)) };
  }

  private look([first, ...rest]: MathNode[]): Tree {
    const known = this.vocabulary.tables ?? new Map<string, LookUp>();
    const key = first?.type === "SymbolNode" ? (first as SymbolNode).name.slice(1) : null;
    const table = key === null ? undefined : known.get(key);
    const at = rest.map((argument) => this.read(argument));
    if (key === null || table === undefined) {
      const keys = known.size === 0 ? "no table: none is declared" : [...known.keys()].join(", ");
      return this.refuse(`the unknown table ${key ?? ""}`.trimEnd(), keys);
    }
    this.tables.add(key);
    if (at.length !== table.at.length) {
      const wanted = `${TABLE}(${key}, ${table.at.length === 1 ? "x" : "x, y"})`;
      return this.refuse(`${at.length} coordinates for the table ${key}`, wanted);
    }
    return { kind: "look", table, at, slopes: at.map(() => false) };
  }

  private refuse(found: string, allowed: string): Tree {
    this.faults.push({ found, allowed });
    return number(Number.NaN);
  }
}

const operators: ReadonlySet<string> = new Set(["+", "-", "*", "/", "^"]);
const comparisons: ReadonlySet<string> = new Set(["<", "<=", ">", ">="]);
