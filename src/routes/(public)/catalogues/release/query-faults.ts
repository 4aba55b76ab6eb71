/** The fields of the form, as the query names them. */
const FIELD = '(?:ra|dec|radius|redshift_min|redshift_max)';

/**
 * Takes a refusal's sentence apart: "The query is not valid: dec: give …; ra: give …." becomes a sentence for each field
 * of the form that it names. Faults of other parameters are in none of them.
 */
export function faultsByField(what: string): Map<string, string> {
  const list = what.replace(/^The query is not valid: /, '').replace(/\.$/, '');
  const faults = new Map<string, string>();
  for (const part of list.split(new RegExp(`; (?=${FIELD}: )`))) {
    const found = new RegExp(`^(${FIELD}): (.*)$`).exec(part);
    if (found && !faults.has(found[1])) faults.set(found[1], `${found[2][0].toUpperCase()}${found[2].slice(1)}.`);
  }
  return faults;
}
