/** Someone who can be mentioned. */
export interface Mentionable {
  id: string;
  name: string;
}

const fold = (text: string) => text.normalize('NFC').toLocaleLowerCase('en');
/** Part of a word: a letter, a digit or what joins them. */
const WORD = /[\p{L}\p{N}_]/u;
/** Longer than any name that is typed to find someone. */
const LONGEST_QUERY = 60;

/**
 * Ids of the people that a comment mentions: `@` at the beginning of a word, then a name as it stands in the programme,
 * the longest that fits, in capitals or not. Of two people with one name both are meant.
 */
export function mentionedIn(text: string, people: readonly Mentionable[]): string[] {
  const folded = fold(text);
  const found = new Set<string>();
  for (let at = folded.indexOf('@'); at >= 0; at = folded.indexOf('@', at + 1)) {
    if (at > 0 && WORD.test(folded[at - 1])) continue;
    const fits = people.filter(({ name }) => {
      const end = at + 1 + fold(name).length;
      return folded.startsWith(fold(name), at + 1) && !(end < folded.length && WORD.test(folded[end]));
    });
    const longest = Math.max(...fits.map(({ name }) => name.length));
    for (const { id, name } of fits) if (name.length === longest) found.add(id);
  }
  return [...found];
}

/** The mention that is being typed at the caret: where its `@` stands and what was typed since; null where none is. */
export function mentionAt(text: string, caret: number): { from: number; query: string } | null {
  const from = text.lastIndexOf('@', caret - 1);
  if (from < 0 || (from > 0 && WORD.test(text[from - 1]))) return null;
  const query = text.slice(from + 1, caret);
  return query.length > LONGEST_QUERY || /[\n@]/.test(query) || query.startsWith(' ') ? null : { from, query };
}

/** People whose name, or a word of it, begins with what was typed; by name, at most eight. */
export function completionsOf(query: string, people: readonly Mentionable[]): Mentionable[] {
  const wanted = fold(query);
  return people
    .filter(
      ({ name }) =>
        fold(name).startsWith(wanted) ||
        fold(name)
          .split(/[\s-]+/)
          .some((word) => word.startsWith(wanted)),
    )
    .filter(({ name }) => fold(name) !== wanted)
    .sort((a, b) => a.name.localeCompare(b.name, 'en'))
    .slice(0, 8);
}
