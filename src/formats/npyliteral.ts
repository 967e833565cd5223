/**
 * A value of the few Python literals that NPY headers are made of. Strings stand as they are written
 * between their quotes, escapes untouched.
 */
export type Literal =
  | string
  | number
  | boolean
  | null
  | { readonly kind: "tuple" | "list"; readonly items: readonly Literal[] }
  | { readonly kind: "dict"; readonly entries: ReadonlyMap<string, Literal> };

type Token = Exclude<Literal, object> | { readonly mark: string };

const TOKEN =
  /[ \t\r\n]*(?:'((?:[^'\\\r\n]|\\.)*)'|"((?:[^"\\\r\n]|\\.)*)"|(\d+)L?(?!\w)|(True|False|None)(?!\w)|([{}()[\],:])|$)/y;
const DEEPEST = 32;

/**
 * Reads one literal: strings, whole numbers, True, False, None, tuples, lists, and dictionaries whose
 * keys are strings. Nothing is ever evaluated; anything else is an error. The `L` that Python 2 put
 * behind long numbers is let pass, as numpy does.
 *
 * @throws {SyntaxError} with the character, counted from 1, where the text stops making sense
 */
export function parseLiteral(text: string): Literal {
  const tokens = new Tokens(text);
  const value = parseValue(tokens, 0);
  if (!tokens.ended()) throw tokens.unexpected();
  return value;
}

class Tokens {
  readonly #text: string;
  readonly #pattern = new RegExp(TOKEN);
  #start = 0;
  #token: Token | undefined;

  constructor(text: string) {
    this.#text = text;
    this.next();
  }

  /** Steps on and gives the token that was stepped over; undefined at the end of the text. */
  next(): Token | undefined {
    const passed = this.#token;
    this.#start = this.#pattern.lastIndex;
    const match = this.#pattern.exec(this.#text);
    if (match === null) throw this.unexpected();
    const [, single, double, digits, word, mark] = match;
    if (digits !== undefined) this.#token = Number(digits);
    else if (word !== undefined) this.#token = word === "None" ? null : word === "True";
    else if (mark !== undefined) this.#token = { mark };
    else this.#token = single ?? double;
    return passed;
  }

  /** Steps over a mark if it comes next. */
  pass(mark: string): boolean {
    const token = this.#token;
    if (typeof token !== "object" || token === null || token.mark !== mark) return false;
    this.next();
    return true;
  }

  ended(): boolean {
    return this.#token === undefined;
  }

  unexpected(): SyntaxError {
    return new SyntaxError(`character ${this.#start + 1}`);
  }
}

function parseValue(tokens: Tokens, depth: number): Literal {
  if (depth > DEEPEST) throw tokens.unexpected();
  if (tokens.pass("{")) return parseDict(tokens, depth);
  if (tokens.pass("[")) return { kind: "list", items: parseItems(tokens, "]", depth).items };
  if (tokens.pass("(")) {
    const { items, comma } = parseItems(tokens, ")", depth);
    // Brackets around one value without a comma are just brackets in Python.
    return items.length === 1 && !comma ? items[0] : { kind: "tuple", items };
  }
  const refusal = tokens.unexpected();
  const token = tokens.next();
  if (token === undefined || (typeof token === "object" && token !== null)) throw refusal;
  return token;
}

function parseItems(
  tokens: Tokens,
  end: string,
  depth: number,
): { readonly items: readonly Literal[]; readonly comma: boolean } {
  const items: Literal[] = [];
  let comma = false;
  while (!tokens.pass(end)) {
    if (items.length > 0 && !comma) throw tokens.unexpected();
    items.push(parseValue(tokens, depth + 1));
    comma = tokens.pass(",");
  }
  return { items, comma };
}

function parseDict(tokens: Tokens, depth: number): Literal {
  const entries = new Map<string, Literal>();
  let comma = true;
  while (!tokens.pass("}")) {
    const refusal = tokens.unexpected();
    const key = comma ? tokens.next() : undefined;
    if (typeof key !== "string" || entries.has(key) || !tokens.pass(":")) throw refusal;
    entries.set(key, parseValue(tokens, depth + 1));
    comma = tokens.pass(",");
  }
  return { kind: "dict", entries };
}
