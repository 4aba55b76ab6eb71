/** A value of the YAML that ECSV headers use. */
export type Yaml = string | number | boolean | null | Yaml[] | { [key: string]: Yaml };

const MAX_DEPTH = 20;

/** Value of a plain or quoted scalar. */
function scalar(text: string): Yaml {
  const trimmed = text.trim();
  const quote = trimmed[0];
  if (trimmed.length > 1 && (quote === "'" || quote === '"') && trimmed.endsWith(quote)) {
    const inner = trimmed.slice(1, -1);
    return quote === "'" ? inner.replaceAll("''", "'") : inner.replaceAll(/\\(["\\/])/g, '$1');
  }
  if (trimmed === '' || trimmed === '~' || trimmed === 'null') return null;
  if (/^(true|false)$/i.test(trimmed)) return trimmed.toLowerCase() === 'true';
  const number = Number(trimmed);
  return Number.isFinite(number) ? number : trimmed;
}

/** Flow collections `{a: b, …}` and `[a, b]`, with quoted scalars. */
class FlowReader {
  private at = 0;

  constructor(private readonly text: string) {}

  value(depth: number): Yaml {
    if (depth > MAX_DEPTH) throw new SyntaxError('nested too deeply');
    this.skip();
    this.skipTag();
    const next = this.text[this.at];
    if (next === '{') return this.map(depth);
    if (next === '[') return this.list(depth);
    return scalar(this.token(',}]'));
  }

  private map(depth: number): Yaml {
    const result: { [key: string]: Yaml } = {};
    this.at++;
    for (;;) {
      this.skip();
      if (this.at >= this.text.length) throw new SyntaxError('unclosed {');
      if (this.text[this.at] === '}') break;
      const key = String(scalar(this.token(':,}')) ?? '');
      let value: Yaml = null;
      if (this.text[this.at] === ':') {
        this.at++;
        value = this.value(depth + 1);
      }
      Object.defineProperty(result, key, { value, enumerable: true, configurable: true, writable: true });
      this.skip();
      if (this.text[this.at] === ',') this.at++;
    }
    this.at++;
    return result;
  }

  private list(depth: number): Yaml {
    const result: Yaml[] = [];
    this.at++;
    for (;;) {
      this.skip();
      if (this.at >= this.text.length) throw new SyntaxError('unclosed [');
      if (this.text[this.at] === ']') break;
      const before = this.at;
      result.push(this.value(depth + 1));
      this.skip();
      if (this.text[this.at] === ',') this.at++;
      else if (this.at === before) throw new SyntaxError('no value');
    }
    this.at++;
    return result;
  }

  /** Text up to one of the stops; a colon only stops where a blank or the end follows, as YAML has it. */
  private token(stops: string): string {
    const start = this.at;
    const quote = this.text[this.at];
    if (quote === "'" || quote === '"') {
      const end = this.text.indexOf(quote, this.at + 1);
      this.at = end < 0 ? this.text.length : end + 1;
      while (quote === "'" && this.text[this.at] === "'") {
        const again = this.text.indexOf("'", this.at + 1);
        this.at = again < 0 ? this.text.length : again + 1;
      }
    }
    while (this.at < this.text.length) {
      const letter = this.text[this.at];
      if (letter === ':' && stops.includes(':') && !/[\s,}]/.test(this.text[this.at + 1] ?? ' ')) {
        this.at++;
        continue;
      }
      if (stops.includes(letter)) break;
      this.at++;
    }
    return this.text.slice(start, this.at);
  }

  private skip(): void {
    while (/\s/.test(this.text[this.at] ?? '')) this.at++;
  }

  private skipTag(): void {
    const tag = /^!\S*\s*/.exec(this.text.slice(this.at, this.at + 80));
    if (tag) this.at += tag[0].length;
  }
}

interface Line {
  indent: number;
  text: string;
}

/** Joins the lines of flow collections and folded scalars that run over several lines. */
function joinLines(lines: string[]): Line[] {
  const joined: Line[] = [];
  let open = 0;
  for (const raw of lines) {
    if (raw.trim() === '') continue;
    const indent = raw.length - raw.trimStart().length;
    const text = raw.trim();
    const bare = text.replaceAll(/'[^']*'|"[^"]*"/g, '');
    const last = joined.at(-1);
    if (open > 0 && last) last.text += ` ${text}`;
    else joined.push({ indent, text });
    open = Math.max(0, open + (bare.match(/[{[]/g)?.length ?? 0) - (bare.match(/[}\]]/g)?.length ?? 0));
  }
  return joined;
}

/** A `key: rest` line taken apart: the first colon outside quotes that a blank or the end follows; null where none is. */
function splitKey(text: string): { key: string; rest: string } | null {
  if (/^[{[]/.test(text)) return null;
  let quote = '';
  for (let i = 0; i < text.length; i++) {
    const letter = text[i];
    if (quote) {
      if (letter === quote) quote = '';
    } else if (letter === "'" || letter === '"') quote = letter;
    else if (letter === ':' && /^\s?$/.test(text[i + 1] ?? '')) {
      return i === 0 ? null : { key: text.slice(0, i), rest: text.slice(i + 1).trim() };
    }
  }
  return null;
}

/**
 * Reads the part of YAML that ECSV headers (Astropy Proposal for Enhancement 6, an open format) are written in: block
 * and flow maps and lists, quoted and plain scalars, tags passed over. It is no YAML parser beyond that.
 *
 * @throws SyntaxError where a collection is not closed or nests beyond 20.
 */
export function parseYamlSubset(lines: string[]): Yaml {
  const joined = joinLines(lines);
  return new BlockReader(joined).block(0, 0);
}

class BlockReader {
  private at = 0;

  constructor(private readonly lines: Line[]) {}

  block(indent: number, depth: number): Yaml {
    if (depth > MAX_DEPTH) throw new SyntaxError('nested too deeply');
    const first = this.lines[this.at];
    if (!first || first.indent < indent) return null;
    return first.text === '-' || first.text.startsWith('- ')
      ? this.list(first.indent, depth)
      : this.map(first.indent, depth);
  }

  private list(indent: number, depth: number): Yaml {
    const result: Yaml[] = [];
    for (
      let line = this.lines[this.at];
      line?.indent === indent && /^-(\s|$)/.test(line.text);
      line = this.lines[this.at]
    ) {
      const rest = line.text.slice(1).trimStart();
      if (rest === '') {
        this.at++;
        result.push(this.block(indent + 1, depth + 1));
      } else if (!rest.startsWith('!') && splitKey(rest) !== null) {
        // `- name: x` opens a map whose first key stands behind the dash.
        this.lines[this.at] = { indent: indent + line.text.length - rest.length, text: rest };
        result.push(this.block(indent + 1, depth + 1));
      } else {
        this.at++;
        result.push(new FlowReader(rest).value(depth + 1));
      }
    }
    return result;
  }

  private map(indent: number, depth: number): Yaml {
    const result: { [key: string]: Yaml } = {};
    for (let line = this.lines[this.at]; line?.indent === indent; line = this.lines[this.at]) {
      const split = splitKey(line.text);
      this.at++;
      if (!split) continue;
      const rest = split.rest.replace(/^!\S*\s*/, '');
      let value: Yaml;
      if (rest !== '') value = this.inline(rest, indent, depth);
      else if (/^-(\s|$)/.test(this.lines[this.at]?.text ?? '') && this.lines[this.at].indent === indent)
        value = this.list(indent, depth + 1);
      else value = this.block(indent + 1, depth + 1);
      const key = String(scalar(split.key) ?? '');
      Object.defineProperty(result, key, { value, enumerable: true, configurable: true, writable: true });
    }
    return result;
  }

  private inline(rest: string, indent: number, depth: number): Yaml {
    if (/^[{[]/.test(rest)) return new FlowReader(rest).value(depth + 1);
    let folded = rest;
    while (this.lines[this.at] && this.lines[this.at].indent > indent) folded += ` ${this.lines[this.at++].text}`;
    return scalar(folded);
  }
}
