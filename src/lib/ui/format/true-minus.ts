/** Writes the minus of a number as U+2212, as wide as a plus; a rounded zero loses its sign. */
export function trueMinus(text: string): string {
  return text.replace(/^-(?=0(?:\.0*)?$)/, '').replace(/-/g, '\u2212');
}
