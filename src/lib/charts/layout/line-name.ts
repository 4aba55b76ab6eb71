const GREEK: Record<string, string> = {
  alpha: 'α',
  beta: 'β',
  gamma: 'γ',
  delta: 'δ',
  epsilon: 'ε',
  zeta: 'ζ',
  eta: 'η',
  theta: 'θ',
  iota: 'ι',
  kappa: 'κ',
};
const SERIES: Record<string, string> = { H: 'H', Lyman: 'Ly', Paschen: 'Pa' };

/**
 * A line's or ion's name as it is drawn: `H-alpha 6565` becomes `Hα 6565`, `Lyman-alpha` `Lyα`. Spaces do not break,
 * so that a name never falls apart across rows. Names without Greek words only get their spaces.
 */
export function lineLabel(name: string): string {
  return name
    .replace(/\b(H|Lyman|Paschen)-([a-z]+|\d+)\b/g, (whole, series: string, member: string) =>
      GREEK[member] ? SERIES[series] + GREEK[member] : /^\d+$/.test(member) ? SERIES[series] + member : whole,
    )
    .replace(/ /g, '\u00a0');
}

/** The same for whole sentences: only the names in it are changed, and only their own spaces stop breaking. */
export function lineLabelsIn(sentence: string): string {
  return sentence.replace(
    /(?:\b(?:H|Lyman|Paschen)-(?:[a-z]+|\d+)|\[?\b(?:He|[A-Z][a-z]?) [IV]+\]?)(?: \d{3,5}\b)?/g,
    (name) => lineLabel(name),
  );
}
