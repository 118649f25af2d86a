/**
 * Formulas as data: numbers, names, + − * / ^, brackets, and a few functions. What computes a works' own quantity and
 * the limits of an emission rule is a row in a table and not code, so it can be added, printed and checked.
 */

type Operator = '+' | '-' | '*' | '/' | '^';

type Node =
  | { kind: 'number'; value: number }
  | { kind: 'name'; name: string }
  | { kind: 'negate'; of: Node }
  | { kind: 'binary'; operator: Operator; left: Node; right: Node }
  | { kind: 'call'; name: FunctionName; of: Node[] };

/** A formula that was read; `names` are what it needs, each once, in the order in which they first stand. */
export interface Formula {
  text: string;
  names: readonly string[];
  root: Node;
}

/** `at` is the place in the text, from 0, at which reading stopped. */
type FormulaResult = { ok: true; formula: Formula } | { ok: false; reason: string; at: number };

const FUNCTIONS = {
  min: { least: 2, most: 8, of: (...values: number[]) => Math.min(...values) },
  max: { least: 2, most: 8, of: (...values: number[]) => Math.max(...values) },
  lg: { least: 1, most: 1, of: (value: number) => Math.log10(value) },
  sqrt: { least: 1, most: 1, of: (value: number) => Math.sqrt(value) },
  abs: { least: 1, most: 1, of: (value: number) => Math.abs(value) },
} satisfies Record<string, { least: number; most: number; of: (...values: number[]) => number }>;

type FunctionName = keyof typeof FUNCTIONS;

/** Names of the functions that a formula may use; `lg` is the logarithm to base 10. */
export const FORMULA_FUNCTIONS = Object.keys(FUNCTIONS);

const LONGEST = 300;
const DEEPEST = 40;

function isFunction(name: string): name is FunctionName {
  return Object.hasOwn(FUNCTIONS, name);
}

class Refused extends Error {
  readonly at: number;

  constructor(message: string, at: number) {
    super(message);
    this.at = at;
  }
}

/** Reads a formula by recursive descent; `^` binds tightest and to the right, then the sign, then * and /. */
class Reader {
  private at = 0;
  private depth = 0;
  readonly names: string[] = [];
  private readonly text: string;

  constructor(text: string) {
    this.text = text;
  }

  readAll(): Node {
    const root = this.sum();
    this.blanks();
    if (this.at < this.text.length) {
      throw new Refused(`“${this.text.charAt(this.at)}” is not expected here.`, this.at);
    }
    return root;
  }

  private blanks(): void {
    while (/\s/.test(this.text.charAt(this.at))) this.at += 1;
  }

  /** The next sign if it is one of these. */
  private take(signs: string): string | null {
    this.blanks();
    const sign = this.text.charAt(this.at);
    if (sign === '' || !signs.includes(sign)) return null;
    this.at += 1;
    return sign;
  }

  private sum(): Node {
    this.depth += 1;
    if (this.depth > DEEPEST) throw new Refused('The formula is nested too deeply.', this.at);
    let left = this.product();
    for (let sign = this.take('+-−'); sign !== null; sign = this.take('+-−')) {
      left = { kind: 'binary', operator: sign === '+' ? '+' : '-', left, right: this.product() };
    }
    this.depth -= 1;
    return left;
  }

  private product(): Node {
    let left = this.signed();
    for (let sign = this.take('*/·'); sign !== null; sign = this.take('*/·')) {
      left = { kind: 'binary', operator: sign === '/' ? '/' : '*', left, right: this.signed() };
    }
    return left;
  }

  private signed(): Node {
    if (this.take('-−') === null) return this.power();
    this.depth += 1;
    if (this.depth > DEEPEST) throw new Refused('The formula is nested too deeply.', this.at);
    const of = this.signed();
    this.depth -= 1;
    return { kind: 'negate', of };
  }

  private power(): Node {
    const base = this.atom();
    return this.take('^') === null
      ? base
      : { kind: 'binary', operator: '^', left: base, right: this.signed() };
  }

  private atom(): Node {
    if (this.take('(') !== null) {
      const inner = this.sum();
      if (this.take(')') === null) throw new Refused('A bracket is not closed.', this.at);
      return inner;
    }
    const rest = this.text.slice(this.at);
    const number = /^(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?/i.exec(rest);
    if (number !== null) {
      this.at += number[0].length;
      return { kind: 'number', value: Number(number[0]) };
    }
    const name = /^[a-z][a-z0-9_]*/i.exec(rest);
    if (name === null) {
      throw new Refused(
        rest === '' ? 'The formula ends too early.' : `“${rest.charAt(0)}” is not expected here.`,
        this.at,
      );
    }
    const from = this.at;
    this.at += name[0].length;
    return this.take('(') === null ? this.named(name[0], from) : this.call(name[0], from);
  }

  private named(name: string, from: number): Node {
    if (isFunction(name)) throw new Refused(`${name} needs brackets with what it is of.`, from);
    if (!this.names.includes(name)) this.names.push(name);
    return { kind: 'name', name };
  }

  private call(name: string, from: number): Node {
    if (!isFunction(name)) {
      throw new Refused(`There is no function ${name}; there are ${FORMULA_FUNCTIONS.join(', ')}.`, from);
    }
    const of = [this.sum()];
    while (this.take(',;') !== null) of.push(this.sum());
    if (this.take(')') === null) throw new Refused('A bracket is not closed.', this.at);
    const { least, most } = FUNCTIONS[name];
    if (of.length < least || of.length > most) {
      const wanted = least === most ? String(least) : `${String(least)} to ${String(most)}`;
      throw new Refused(`${name} takes ${wanted} values, not ${String(of.length)}.`, from);
    }
    return { kind: 'call', name, of };
  }
}

/**
 * Reads a formula.
 *
 * @param known the names that may stand in it; left out, any may
 * @returns the formula, or a sentence and the place in the text that it is about
 */
export function parseFormula(text: string, known?: readonly string[]): FormulaResult {
  if (text.trim() === '') return { ok: false, reason: 'The formula is empty.', at: 0 };
  if (text.length > LONGEST) {
    return { ok: false, reason: `A formula has at most ${String(LONGEST)} characters.`, at: LONGEST };
  }
  try {
    const reader = new Reader(text);
    const root = reader.readAll();
    const strange = reader.names.find((name) => known !== undefined && !known.includes(name));
    if (strange !== undefined) {
      const reason = `${strange} is not known here; there are ${known?.join(', ') ?? ''}.`;
      return { ok: false, reason, at: text.indexOf(strange) };
    }
    return { ok: true, formula: { text, names: reader.names, root } };
  } catch (error) {
    if (error instanceof Refused) return { ok: false, reason: error.message, at: error.at };
    throw error;
  }
}

function valueOf(node: Node, values: Readonly<Record<string, number>>): number {
  switch (node.kind) {
    case 'number':
      return node.value;
    case 'name':
      return Object.hasOwn(values, node.name) ? (values[node.name] ?? NaN) : NaN;
    case 'negate':
      return -valueOf(node.of, values);
    case 'call': {
      const call: (...of: number[]) => number = FUNCTIONS[node.name].of;
      return call(...node.of.map((each) => valueOf(each, values)));
    }
    case 'binary': {
      const left = valueOf(node.left, values);
      const right = valueOf(node.right, values);
      if (node.operator === '+') return left + right;
      if (node.operator === '-') return left - right;
      if (node.operator === '*') return left * right;
      return node.operator === '/' ? left / right : left ** right;
    }
  }
}

/** The formula's value; NaN where a name has none, ±Infinity or NaN where the arithmetic has none. */
export function evaluateFormula(formula: Formula, values: Readonly<Record<string, number>>): number {
  return valueOf(formula.root, values);
}
