/**
 * A name of the same form as another that nobody bears yet: its last run of digits is counted on, the last two of them
 * staying under 60 where they may be minutes or seconds. Null where the name has no digits, or all near ones are taken.
 */
export function nameLike(name: string, taken: ReadonlySet<string>, steps: readonly number[]): string | null {
  const match = /^(.*?)(\d+)(\D*)$/s.exec(name);
  if (!match) return null;
  const [, head, digits, tail] = match;
  const sexagesimal = digits.length >= 2 && Number(digits.slice(-2)) < 60;
  for (const step of steps) {
    const value = Number(digits) + step;
    if (step === 0 || value < 0) continue;
    const text = String(value).padStart(digits.length, '0');
    if (text.length !== digits.length || (sexagesimal && Number(text.slice(-2)) >= 60)) continue;
    const candidate = `${head}${text}${tail}`;
    if (!taken.has(candidate)) return candidate;
  }
  return null;
}
