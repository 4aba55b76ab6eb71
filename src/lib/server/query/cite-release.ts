import type { Citation } from '$lib/domain/release-view';

/** BibTeX reads these as commands. */
const bibtexText = (text: string) =>
  text.replace(/[\\{}&%$#_~^]/g, (c) => ({ '\\': '\\textbackslash{}', '~': '\\~{}', '^': '\\^{}' })[c] ?? `\\${c}`);

/** The citation of a release by its programme, year, title, number and address. */
export function citeRelease(release: {
  programme: string;
  title: string;
  slug: string;
  number: number;
  frozenAt: Date;
  url: string;
  isDemo: boolean;
}): Citation {
  const { programme, title, slug, number, url, isDemo } = release;
  const year = release.frozenAt.getUTCFullYear();
  const invented = 'Invented data, not observations.';
  const fields = [
    ['author', `{${bibtexText(programme)}}`],
    ['title', bibtexText(title)],
    ['version', String(number)],
    ['year', String(year)],
    ['url', url],
    ...(isDemo ? [['note', invented]] : []),
  ];
  const entries = fields.map(([name, value]) => `  ${name.padEnd(7)} = {${value}}`).join(',\n');
  return {
    text: `${programme} (${year}). ${title}, release ${number}. ${url}${isDemo ? `. ${invented}` : ''}`,
    bibtex: `@dataset{${slug}-${number},\n${entries}\n}`,
  };
}
