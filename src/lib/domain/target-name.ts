const LONGEST = 200;
/** The minus and hyphens of Unicode that stand where a keyboard has `-`. */
const MINUS = /[\u2010-\u2015\u2212\uFE63\uFF0D]/g;

/**
 * A target's name folded to one spelling, so that `J0412.6−3120`, `j0412.6-3120` and `J 0412.6-3120` are one: NFKC, any
 * minus as `-`, no blanks and underscores, lower case. `+` and `-` stay, since they tell places apart.
 */
export function foldName(name: string): string {
  return name
    .normalize('NFKC')
    .replace(MINUS, '-')
    .replace(/[\s_]+/g, '')
    .toLowerCase()
    .slice(0, LONGEST);
}
