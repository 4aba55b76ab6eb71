import type { CardValue } from '../cards';
import { Cards } from '../cards';
import { roleOfName, type Role } from '../columns/roles';
import { parseUnit } from '../units/parse-unit';
import type { TextColumnWords } from './text-column';

/** What the comments of a text table say. */
export interface TextRemarks {
  cards: Cards;
  sentences: string[];
  /** Units by role, from lines such as `wavelength unit: nm`. */
  units: Partial<Record<Role, string>>;
}

const UNIT_LINE = /^(.{1,40}?)[\s_-]+units?\s*[:=]\s*(.{1,100})$/i;
const CARD_LINE = /^([A-Za-z][A-Za-z0-9_-]{0,30})\s*[=:]\s*(.*)$/;

function cardValue(text: string): CardValue | undefined {
  const string = /^'((?:[^']|'')*)'/.exec(text) ?? /^"([^"]*)"/.exec(text);
  if (string) return string[1].replaceAll("''", "'").trimEnd();
  const bare = text.replace(/\s\/\s.*$/, '').trim();
  if (bare === '') return undefined;
  const number = Number(bare);
  if (Number.isFinite(number)) return number;
  return bare === 'T' || bare === 'F' ? bare === 'T' : bare;
}

/** Reads comment lines: `KEY = value` cards, `wavelength unit: nm`, and sentences that may name medium or velocity frame. */
export function readRemarks(comments: string[]): TextRemarks {
  const remarks: TextRemarks = { cards: new Cards(), sentences: [], units: {} };
  for (const comment of comments) {
    const text = comment.trim();
    if (text === '' || text.length > 2000) continue;
    const unit = UNIT_LINE.exec(text);
    const role = unit && roleOfName(unit[1]);
    if (unit && role) {
      remarks.units[role] = unit[2].trim();
      continue;
    }
    const card = CARD_LINE.exec(text);
    const value = card ? cardValue(card[2]) : undefined;
    if (card && value !== undefined) remarks.cards.set(card[1], value);
    if (/\b(vac(uum)?|air|(topo|geo|bary|helio)centric)\b/i.test(text)) remarks.sentences.push(text);
  }
  return remarks;
}

/** Longer headings are no names. */
const MAX_HEADING = 200;
const BRACKETED = /^(.*?)\s*[[(]\s*([^\])]*?)\s*[\])]\s*$/;

/** A heading such as `wavelength [Angstrom]` or `flux (1e-17 erg/s/cm2/Angstrom)`, taken apart. */
export function readHeading(text: string): TextColumnWords {
  const trimmed = text.trim();
  if (trimmed.length > MAX_HEADING)
    return { name: trimmed.slice(0, MAX_HEADING), unit: null, description: null, ucd: null };
  const match = /^(.*?)\s*\[\s*(.*?)\s*\]\s*$/.exec(trimmed) ?? BRACKETED.exec(trimmed);
  if (match && match[1] !== '' && !/^(log|log10|ln|dex)$/i.test(match[1])) {
    return { name: match[1].trim(), unit: match[2] || null, description: null, ucd: null };
  }
  const divided = /^([^\s/]+)\s*\/\s*(\S+)$/.exec(trimmed);
  if (divided && parseUnit(divided[2])) return { name: divided[1], unit: divided[2], description: null, ucd: null };
  const suffix = /^(wave(?:length)?|lambda)_(a|aa|ang|angstroms?|nm|um|micron|mum|m)$/i.exec(trimmed);
  if (suffix) return { name: suffix[1], unit: suffix[2] === 'mum' ? 'um' : suffix[2], description: null, ucd: null };
  return { name: trimmed, unit: null, description: null, ucd: null };
}

/**
 * Headings of `count` columns out of the last comment that has them: `columns: wavelength [nm]  flux [..]  error`, or
 * bare names set apart by blanks or commas, one of which must be a generic name.
 *
 * @returns null where no comment names the columns.
 */
export function headingsFromComments(comments: string[], count: number): TextColumnWords[] | null {
  for (let i = comments.length - 1; i >= 0; i--) {
    const text = comments[i].trim().replace(/^columns?\s*[:=]\s*/i, '');
    if (text === '' || text.length > 2000) continue;
    const parts = text.match(/[^\s,[(|]+(?:\s*\[[^\]]*\]|\s*\([^)]*\))?/g) ?? [];
    if (parts.length !== count) continue;
    const headings = parts.map(readHeading);
    if (headings.some((heading) => roleOfName(heading.name) === 'wavelength')) return headings;
  }
  return null;
}
