const NOT_SEEN = 2;

/** A line in range, seen or not. */
export interface LineSignal {
  line: string;
  signalToNoise: number;
}

/**
 * Whether a set of line fits has forbidden lines so strong that a Balmer line in range would have to be seen, and is not:
 * [O III] 5008 of signal-to-noise 20 without H-beta asks for a ratio above 10, [N II] or [S II] of 6 without H-alpha for
 * one above 3. Few nebulae have either: the bounds of the diagnostic diagrams (Kewley et al. 2001, figure 1; Kauffmann et
 * al. 2003, figure 1) lie below. Such a set may be right, and is not secure. A line out of range counts neither way.
 */
export function lacksBalmer(lines: readonly LineSignal[]): boolean {
  const best = (...names: string[]) =>
    lines.reduce((most, { line, signalToNoise }) => (names.includes(line) ? Math.max(most, signalToNoise) : most), -1);
  const unseen = (name: string) => {
    const signal = best(name);
    return signal >= 0 && signal < NOT_SEEN;
  };
  return (
    (unseen('H-beta 4863') && best('[O III] 5008') >= 20) ||
    (unseen('H-alpha 6565') && best('[N II] 6585', '[S II] 6718', '[S II] 6733') >= 6)
  );
}
