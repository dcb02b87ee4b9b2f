/** A JSON text with the line (from 1) on which each value begins, by its path as in `rigs.0.port`. */
export interface LocatedJson {
  value: unknown;
  lines: ReadonlyMap<string, number>;
}

/** The first thing in a text that is no JSON. */
export class JsonProblem extends Error {
  constructor(
    readonly line: number,
    readonly found: string | null,
    readonly wanted: string,
  ) {
    super(`line ${line}: ${wanted} is wanted here, ${found === null ? 'the file ends' : `not ${found}`}`);
    this.name = 'JsonProblem';
  }
}

interface Token {
  text: string;
  line: number;
}

const TOKEN = /"(?:[^"\\\n]|\\.)*"|[{}[\],:]|[^\s{}[\],:"]+|"[^\n]*/g;

/** Reads JSON and remembers where everything stands. @throws JsonProblem with the line of the first fault */
export function parseLocatedJson(text: string): LocatedJson {
  const reader = new Reader(tokensOf(text));
  const value = reader.value('');
  reader.end();
  return { value, lines: reader.lines };
}

function tokensOf(text: string): Token[] {
  const tokens: Token[] = [];
  let line = 1;
  let read = 0;
  for (const match of text.matchAll(TOKEN)) {
    line += text.slice(read, match.index).split('\n').length - 1;
    read = match.index;
    tokens.push({ text: match[0], line });
  }
  return tokens;
}

class Reader {
  readonly lines = new Map<string, number>();
  #next = 0;

  constructor(private readonly tokens: readonly Token[]) {}

  value(path: string): unknown {
    const token = this.tokens[this.#next];
    if (token) this.lines.set(path, token.line);
    if (token?.text === '{') return this.#object(path);
    if (token?.text === '[') return this.#list(path);
    return this.#scalar('a value');
  }

  end(): void {
    if (this.#next < this.tokens.length) throw this.#problem('the end of the file');
  }

  #object(path: string): Record<string, unknown> {
    const entries: [string, unknown][] = [];
    this.#items('{', '}', () => {
      const key = this.#scalar('a name in quotes');
      if (typeof key !== 'string') throw this.#problem('a name in quotes', -1);
      this.#take(':');
      entries.push([key, this.value(path === '' ? key : `${path}.${key}`)]);
    });
    return Object.fromEntries(entries);
  }

  #list(path: string): unknown[] {
    const items: unknown[] = [];
    this.#items('[', ']', () => {
      items.push(this.value(path === '' ? `${items.length}` : `${path}.${items.length}`));
    });
    return items;
  }

  #items(open: string, close: string, item: () => void): void {
    this.#take(open);
    if (this.#has(close)) return this.#take(close);
    item();
    while (this.#has(',')) {
      this.#take(',');
      item();
    }
    this.#take(close);
  }

  #scalar(wanted: string): unknown {
    const token = this.tokens[this.#next];
    if (!token) throw this.#problem(wanted);
    try {
      const value: unknown = JSON.parse(token.text);
      this.#next += 1;
      return value;
    } catch {
      throw this.#problem(wanted);
    }
  }

  #has(text: string): boolean {
    return this.tokens[this.#next]?.text === text;
  }

  #take(text: string): void {
    if (!this.#has(text)) throw this.#problem(text);
    this.#next += 1;
  }

  #problem(wanted: string, step = 0): JsonProblem {
    const token = this.tokens[this.#next + step];
    const line = token?.line ?? this.tokens.at(-1)?.line ?? 1;
    return new JsonProblem(line, token?.text ?? null, wanted);
  }
}
