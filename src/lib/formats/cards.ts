/** One header value, as FITS types it; undefined values are left out. */
export type CardValue = string | number | boolean;

/** Header cards by upper-case keyword; the first of a repeated keyword counts. FITS headers and text comments share it. */
export class Cards {
  private readonly values = new Map<string, CardValue>();
  private record: Record<string, CardValue> | null = null;

  /** Cards that are looked up here when this header is silent (a primary header behind its extensions). */
  constructor(private readonly inherited: Cards | null = null) {}

  set(keyword: string, value: CardValue): void {
    const key = keyword.toUpperCase();
    if (!this.values.has(key)) this.values.set(key, value);
  }

  /** The same header with some cards of other values. */
  with(changes: Record<string, CardValue>): Cards {
    const changed = new Cards(this.inherited);
    for (const [keyword, value] of Object.entries(changes)) changed.set(keyword, value);
    for (const [keyword, value] of this.values) changed.set(keyword, value);
    return changed;
  }

  /** Adds to the text of a card already there (CONTINUE). */
  append(keyword: string, more: string): void {
    const key = keyword.toUpperCase();
    const before = this.values.get(key);
    if (typeof before === 'string') this.values.set(key, before + more);
  }

  has(keyword: string): boolean {
    return this.own(keyword) || (this.inherited?.has(keyword) ?? false);
  }

  /** True where this header itself has the card. */
  own(keyword: string): boolean {
    return this.values.has(keyword.toUpperCase());
  }

  get(keyword: string): CardValue | undefined {
    return this.values.get(keyword.toUpperCase()) ?? this.inherited?.get(keyword);
  }

  /** A finite number, also where it is written as text; null where missing or no number. */
  number(keyword: string): number | null {
    const value = this.get(keyword);
    if (typeof value === 'number') return value;
    if (typeof value !== 'string' || !/^\s*[+-]?(\d|\.\d)/.test(value)) return null;
    const number = Number(value.trim());
    return Number.isFinite(number) ? number : null;
  }

  /** A trimmed text; null where missing, empty or no text. */
  text(keyword: string): string | null {
    const value = this.get(keyword);
    if (value === undefined || typeof value === 'boolean') return null;
    const trimmed = String(value).trim();
    return trimmed === '' ? null : trimmed;
  }

  /** The first of several keywords that holds a number. */
  firstNumber(...keywords: string[]): number | null {
    for (const keyword of keywords) {
      const value = this.number(keyword);
      if (value !== null) return value;
    }
    return null;
  }

  /** The first of several keywords that holds a text. */
  firstText(...keywords: string[]): string | null {
    for (const keyword of keywords) {
      const value = this.text(keyword);
      if (value !== null) return value;
    }
    return null;
  }

  /** All cards, inherited ones included, for people to read; one object for all spectra under this header. */
  toRecord(): Record<string, CardValue> {
    this.record ??= this.collect();
    return this.record;
  }

  private collect(limit = 500): Record<string, CardValue> {
    const record: Record<string, CardValue> = Object.create(null) as Record<string, CardValue>;
    for (const source of [this.inherited, this]) {
      if (!source) continue;
      for (const [key, value] of source.values) {
        if (Object.keys(record).length >= limit && !(key in record)) break;
        record[key] = value;
      }
    }
    return { ...record };
  }
}
