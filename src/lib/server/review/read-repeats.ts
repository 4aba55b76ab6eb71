import { z } from 'zod';
import { CONFIDENCE_WORDS, type Confidence } from '$lib/domain/confidence';
import { Refusal } from '$lib/domain/refusal';
import { csvRecord } from '$lib/formats/tables/write-csv';
import { judgeErrors, pairRepeats, type RepeatFigures, type RepeatPair } from '$lib/science/review/measure-repeats';
import { hiddenAnswers } from '../auth/hidden-answer';
import { permit, programmesWhere, type Actor } from '../auth/permissions';
import { namedProgrammes } from '../database/queries/named-programmes';
import { findProgramme } from '../database/queries/nights';
import { repeatRows, type RepeatRow } from '../database/queries/repeats';

export const repeatsSchema = z.object({
  /** Slug or id; the first of the reader's programmes where it is left out. */
  programme: z.string().min(1).max(60).optional(),
});

export interface RepeatInTable {
  targetId: string;
  target: string;
  /** The less certain of both. */
  confidence: Confidence;
  first: { id: string; civilDate: string; redshift: number; redshiftError: number };
  second: { id: string; civilDate: string; redshift: number; redshiftError: number };
  differenceKms: number;
  errorKms: number;
  pull: number;
  isOther: boolean;
}

export interface Repeats {
  programme: { slug: string; name: string };
  programmes: { slug: string; name: string }[];
  /** Those furthest apart by their errors first. */
  pairs: RepeatInTable[];
  all: RepeatFigures;
  byConfidence: { word: Confidence; figures: RepeatFigures }[];
  /** Targets kept back, since the reader is to look at one of their spectra without the engine's answer. */
  keptBack: number;
}

/** Pairs of repeats of a programme against the errors quoted for them. */
export async function readRepeats(actor: Actor | null, input: z.output<typeof repeatsSchema>): Promise<Repeats> {
  const programmes = await namedProgrammes(programmesWhere(actor, 'spectrum.read'));
  const asked = input.programme ? await findProgramme(input.programme) : programmes.at(0);
  if (!asked) throw new Refusal('not-found', 'There is no such programme, or you are not in it.', 'See Programmes.');
  const reader = permit(actor, 'spectrum.read', asked.id);
  const [rows, isHidden] = await Promise.all([repeatRows(asked.id), hiddenAnswers(reader, asked.id)]);
  const keptBack = new Set(rows.filter(({ id }) => isHidden(id)).map(({ targetId }) => targetId));
  const pairs = pairRepeats(rows.filter(({ targetId }) => !keptBack.has(targetId)));
  const wordOf = ({ first, second }: RepeatPair<RepeatRow>) =>
    CONFIDENCE_WORDS[Math.max(CONFIDENCE_WORDS.indexOf(first.confidence), CONFIDENCE_WORDS.indexOf(second.confidence))];
  const shown = (row: RepeatRow) => {
    const { id, civilDate, redshift, redshiftError } = row;
    return { id, civilDate, redshift, redshiftError };
  };
  return {
    programme: { slug: asked.slug, name: asked.name },
    programmes: programmes.map(({ slug, name }) => ({ slug, name })),
    pairs: pairs
      .map((pair) => {
        const { first, second, differenceKms, errorKms, pull, isOther } = pair;
        const { targetId, target } = first;
        const values = { differenceKms, errorKms, pull, isOther };
        return { targetId, target, confidence: wordOf(pair), first: shown(first), second: shown(second), ...values };
      })
      .sort((a, b) => Math.abs(b.pull) - Math.abs(a.pull)),
    all: judgeErrors(pairs),
    byConfidence: CONFIDENCE_WORDS.map((word) => ({
      word,
      figures: judgeErrors(pairs.filter((pair) => wordOf(pair) === word)),
    })).filter(({ figures }) => figures.pairs + figures.others > 0),
    keptBack: keptBack.size,
  };
}

const COLUMNS = [
  ...['target', 'confidence', 'first_spectrum', 'first_night', 'first_redshift', 'first_redshift_error'],
  ...['second_spectrum', 'second_night', 'second_redshift', 'second_redshift_error'],
  ...['difference_km_s', 'error_km_s', 'pull', 'is_other_answer'],
];

/** The pairs as CSV (RFC 4180), in the order of the page; its permission is the page's. */
export async function repeatsCsv(
  actor: Actor | null,
  input: z.output<typeof repeatsSchema>,
): Promise<{ name: string; csv: string }> {
  const { pairs, programme } = await readRepeats(actor, input);
  const rows = pairs.map(({ target, confidence, first, second, differenceKms, errorKms, pull, isOther }) =>
    csvRecord([
      ...[target, confidence, first.id, first.civilDate, first.redshift, first.redshiftError],
      ...[second.id, second.civilDate, second.redshift, second.redshiftError],
      ...[differenceKms, errorKms, pull, isOther ? 1 : 0],
    ]),
  );
  return { name: `farglow-${programme.slug}-repeats.csv`, csv: csvRecord(COLUMNS) + rows.join('') };
}
