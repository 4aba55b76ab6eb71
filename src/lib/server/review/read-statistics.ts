import { CONFIDENCE_WORDS } from '$lib/domain/confidence';
import { blindLooks, type LookGiven } from '$lib/science/review/blind-looks';
import { countPlanted, type PlantedCount } from '$lib/science/review/count-planted';
import { measureAnchoring, type AnchoredLook, type Anchoring } from '$lib/science/review/measure-anchoring';
import { measureAgreement, medianKnown, type Agreement } from '$lib/science/review/measure-agreement';
import { standingDecision } from '$lib/science/review/standing-decision';
import { may, programmesWhere, type Actor } from '../auth/permissions';
import { everyLook, judgedProgrammes, namesOf, standingLooks, type EveryLookRow } from '../database/queries/looks';
import { plantedAnswers } from '../database/queries/planted';
import { everRuled, standingRulings } from '../database/queries/rulings';
import { countPlantedLooks } from './count-planted-looks';

/** Figures of the looks of some people at some spectra. */
export interface LookFigures extends Agreement {
  looks: number;
  /** Median time of a look, seconds; null where none is known. */
  medianSeconds: number | null;
  /** Looks whose time is known. */
  timed: number;
}

export interface ProgrammeStatistics extends LookFigures {
  id: string;
  name: string;
  /** Looks the programme asks for. */
  wanted: number;
  measured: number;
  /** Spectra with at least one verdict that stands. */
  judged: number;
  open: number;
  ruled: number;
  anchoring: Anchoring;
  /** The engine on planted spectra, for curators. */
  enginePlanted: PlantedCount | null;
  /** The reader alone; everyone for a curator. By name. */
  people: (LookFigures & { id: string; name: string; isReader: boolean; planted: PlantedCount | null })[];
}

function asLook(row: EveryLookRow): AnchoredLook {
  const { id, spectrumId, userId, redshift, redshiftError, confidence, lookSeconds: seconds, kind } = row;
  const engineHidden = row.engineHidden === null ? null : !!row.engineHidden;
  const { engineRedshift } = row;
  const seenOthers = row.seenOthers === null ? null : !!row.seenOthers;
  const withdrawn = kind === 'withdrawn';
  const word = confidence === null ? null : CONFIDENCE_WORDS.indexOf(confidence);
  return {
    id,
    spectrumId,
    userId,
    redshift,
    redshiftError,
    withdrawn,
    word,
    seconds,
    seenOthers,
    engineHidden,
    engineRedshift,
  };
}

const DAY_MS = 86_400_000;

function figuresOf(looks: readonly LookGiven[], of?: string): LookFigures {
  const own = of === undefined ? looks : looks.filter(({ userId }) => userId === of);
  const seconds = own.map((look) => look.seconds);
  return {
    looks: own.length,
    medianSeconds: medianKnown(seconds),
    timed: seconds.filter((value) => value !== null).length,
    ...measureAgreement(looks, CONFIDENCE_WORDS.length, of),
  };
}

/** How many spectra of a programme stand how. */
async function countStanding(programmeId: string): Promise<{ judged: number; open: number; ruled: number }> {
  const [looks, rulings] = await Promise.all([standingLooks([programmeId]), standingRulings([programmeId])]);
  const verdicts = new Map<string, typeof looks>(rulings.map(({ spectrumId }) => [spectrumId, []]));
  for (const look of looks) verdicts.set(look.spectrumId, [...(verdicts.get(look.spectrumId) ?? []), look]);
  const ruling = new Map(rulings.map((row) => [row.spectrumId, row]));
  const standing = [...verdicts].map(([id, given]) => standingDecision(given, ruling.get(id) ?? null));
  const open = standing.filter((state) => state === 'open').length;
  return { judged: standing.length, open, ruled: standing.filter((state) => state === 'ruled').length };
}

/**
 * How well looks agree in the reader's programmes, from blind looks alone: what someone said before they could see
 * another's verdict, and nothing by whoever ruled on the spectrum. Figures of one person go to that person and to curators.
 * Planted spectra are in none of it but in a count of their own, up to the last midnight UTC: whoever watched it grow would
 * else know which spectrum was one.
 */
export async function readStatistics(actor: Actor | null, now = new Date()): Promise<ProgrammeStatistics[]> {
  const programmeIds = programmesWhere(actor, 'review.read-statistics');
  if (programmeIds.length === 0) return [];
  const reader = actor!;
  const midnight = new Date(Math.floor(now.getTime() / DAY_MS) * DAY_MS);
  const statistics: ProgrammeStatistics[] = [];
  for (const { id, name, looks: wanted, measured } of await judgedProgrammes(programmeIds)) {
    const [rows, rulers, counts] = await Promise.all([everyLook(id), everRuled(id), countStanding(id)]);
    const ruled = new Set(rulers.map(({ spectrumId, userId }) => `${spectrumId} ${userId}`));
    const given = rows.map(asLook);
    const looks = blindLooks(given, ruled);
    const plantedOf = await countPlantedLooks(id, midnight);
    const everyone = [...new Set([...looks.map(({ userId }) => userId), ...plantedOf.keys()])];
    const readsPeople = may(reader, 'review.read-people', id);
    const shown = readsPeople ? everyone : everyone.filter((one) => one === reader.userId);
    const names = await namesOf(shown);
    const people = shown
      .map((one) => ({
        id: one,
        name: names.get(one) ?? '',
        isReader: one === reader.userId,
        planted: plantedOf.get(one) ?? null,
        ...figuresOf(looks, one),
      }))
      .sort((a, b) => a.name.localeCompare(b.name, 'en'));
    const anchoring = measureAnchoring(given, ruled);
    const enginePlanted = readsPeople ? countPlanted(await plantedAnswers(id, midnight)) : null;
    const whole = { id, name, wanted: Number(wanted), measured: Number(measured), ...counts, anchoring, enginePlanted };
    statistics.push({ ...whole, ...figuresOf(looks), people });
  }
  return statistics;
}
