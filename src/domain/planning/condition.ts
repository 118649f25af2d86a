/** A condition over option keys, as read. */
export type Condition =
  | { kind: 'key'; key: string }
  | { kind: 'not'; of: Condition }
  | { kind: 'and' | 'or'; left: Condition; right: Condition };

type Token = { text: string; at: number };

const TOKEN = /\s*(?:([()])|([A-Za-z0-9]+(?:[._-][A-Za-z0-9]+)*))/y;
// Deep nesting would overrun the stack before it meant anything.
const MAX_LENGTH = 1000;

class Refusal extends Error {
  constructor(
    readonly reason: string,
    readonly at: number,
  ) {
    super(reason);
  }
}

/**
 * Reads a condition such as `band.20m and not (filter.narrow or filter.wide)`. `not` binds closest, then `and`,
 * then `or`; words may be written in capitals. `at` counts characters from 0.
 */
export function parseCondition(
  text: string,
): { ok: true; ast: Condition } | { ok: false; reason: string; at: number } {
  try {
    return { ok: true, ast: new Reader(tokensOf(text), text.length).all() };
  } catch (error) {
    if (error instanceof Refusal) return { ok: false, reason: error.reason, at: error.at };
    throw error;
  }
}

/** Whether the condition holds for the chosen option keys. */
export function evaluateCondition(ast: Condition, chosen: ReadonlySet<string>): boolean {
  switch (ast.kind) {
    case 'key':
      return chosen.has(ast.key);
    case 'not':
      return !evaluateCondition(ast.of, chosen);
    case 'and':
      return evaluateCondition(ast.left, chosen) && evaluateCondition(ast.right, chosen);
    case 'or':
      return evaluateCondition(ast.left, chosen) || evaluateCondition(ast.right, chosen);
  }
}

/** The option keys that a condition names. */
export function keysOf(ast: Condition): Set<string> {
  switch (ast.kind) {
    case 'key':
      return new Set([ast.key]);
    case 'not':
      return keysOf(ast.of);
    case 'and':
    case 'or':
      return new Set([...keysOf(ast.left), ...keysOf(ast.right)]);
  }
}

function tokensOf(text: string): Token[] {
  if (text.length > MAX_LENGTH)
    throw new Refusal(`A condition has at most ${MAX_LENGTH} characters.`, MAX_LENGTH);
  const tokens: Token[] = [];
  const end = text.trimEnd().length;
  TOKEN.lastIndex = 0;
  while (TOKEN.lastIndex < end) {
    const from = TOKEN.lastIndex;
    const match = TOKEN.exec(text);
    if (!match) {
      const at = from + (text.slice(from).length - text.slice(from).trimStart().length);
      throw new Refusal(`“${text.charAt(at)}” cannot stand in a condition.`, at);
    }
    const word = match[1] ?? match[2] ?? '';
    tokens.push({ text: word, at: TOKEN.lastIndex - word.length });
  }
  return tokens;
}

class Reader {
  private next = 0;

  constructor(
    private readonly tokens: Token[],
    private readonly end: number,
  ) {}

  all(): Condition {
    if (this.tokens.length === 0) throw new Refusal('The condition is empty.', 0);
    const ast = this.or();
    const left = this.tokens[this.next];
    if (left?.text === ')') throw new Refusal('A parenthesis is closed that was never opened.', left.at);
    if (left) throw new Refusal(`“and” or “or” is missing before “${left.text}”.`, left.at);
    return ast;
  }

  private or(): Condition {
    let ast = this.and();
    while (this.take('or')) ast = { kind: 'or', left: ast, right: this.and() };
    return ast;
  }

  private and(): Condition {
    let ast = this.not();
    while (this.take('and')) ast = { kind: 'and', left: ast, right: this.not() };
    return ast;
  }

  private not(): Condition {
    return this.take('not') ? { kind: 'not', of: this.not() } : this.primary();
  }

  private primary(): Condition {
    const opened = this.tokens[this.next];
    if (this.take('(')) {
      const ast = this.or();
      if (!this.take(')')) {
        throw new Refusal('A parenthesis is opened and not closed.', opened?.at ?? this.end);
      }
      return ast;
    }
    const token = this.tokens[this.next];
    if (!token) throw new Refusal('An option is missing at the end.', this.end);
    if (['and', 'or', ')'].includes(token.text.toLowerCase())) {
      throw new Refusal(`An option is missing before “${token.text}”.`, token.at);
    }
    this.next += 1;
    return { kind: 'key', key: token.text };
  }

  private take(word: string): boolean {
    if (this.tokens[this.next]?.text.toLowerCase() !== word) return false;
    this.next += 1;
    return true;
  }
}
