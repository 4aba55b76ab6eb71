const shell = (text: string) => `'${text.replaceAll("'", "'\\''")}'`;
const python = (text: string) => JSON.stringify(text);

/** How a script asks for the same rows over plain HTTP. */
export function curlSnippet(address: string, query: [string, string][]): string {
  const options = query.map(([name, value]) => `-d ${shell(`${name}=${value}`)}`);
  return [`curl -G ${shell(address)}`, ...options, `-H 'Accept: text/csv'`].join(' \\\n  ');
}

/** The same in Python, page by page. */
export function pythonSnippet(address: string, query: [string, string][]): string {
  const entries = query.map(([name, value]) => {
    const isNumber = name !== 'confidence' && /^-?\d+(\.\d+)?$/.test(value);
    return `    ${python(name)}: ${isNumber ? value : python(value)},`;
  });
  return [
    'import requests',
    '',
    `address = ${python(address)}`,
    'query = {',
    ...entries,
    '}',
    'rows = []',
    'while True:',
    '    page = requests.get(address, params=query, timeout=60).json()',
    '    rows += page["rows"]',
    '    if page["next"] is None:',
    '        break',
    '    query["cursor"] = page["next"]',
  ].join('\n');
}
