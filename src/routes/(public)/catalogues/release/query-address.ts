/** The parameters of a query for rows that a form or an address holds; empty ones and those of the page left out. */
const QUERY = ['ra', 'dec', 'radius', 'redshift_min', 'redshift_max'] as const;

/** The query in an address, in the order of the interface's own description. */
export function queryIn(params: URLSearchParams): [name: string, value: string][] {
  const pairs: [string, string][] = [];
  for (const name of QUERY) {
    const value = params.get(name)?.trim().replaceAll('\u2212', '-');
    if (value) pairs.push([name, value]);
  }
  const words = params.getAll('confidence').flatMap((value) => value.split(',').filter(Boolean));
  if (words.length) pairs.push(['confidence', words.join(',')]);
  return pairs;
}

/** An address with the query and further parameters. */
export function addressWith(path: string, query: [string, string][], more: Record<string, string> = {}): string {
  const text = new URLSearchParams([...query, ...Object.entries(more)]).toString().replaceAll('%2C', ',');
  return text ? `${path}?${text}` : path;
}
