import type { DraftSelection } from '$lib/domain/release';
import type { Answer } from '$lib/science/release/decide-spectrum';
import { velocityBetweenKms, verdictsAgree } from '$lib/science/review/verdicts-agree';
import {
  candidatesOf,
  lineFluxes,
  measurementFacts,
  type CandidateRow,
  type LineFluxRow,
} from '../database/queries/drafts-judged';
import type { StoredReleaseRow } from '../database/queries/release-rows';
import type { Transaction } from '../database/in-transaction';
import { PUBLISHED_LINES, publishedFluxes, scaleToPublished } from './line-fluxes';
import { readAnswers, type Answers } from './read-answers';

/** Everything a draft would publish, and what came of the spectra that bring no row. */
export interface AssembledRows extends Answers {
  /** In the order of right ascension, numbered from 1; only rows with a position. */
  rows: StoredReleaseRow[];
  /** Names of targets that would enter but have no position. */
  unplaced: string[];
  engineVersions: string[];
}

/** The candidate whose lines belong to an answer: the chosen one, or for one set by hand the nearest that agrees. */
function candidateOf(answer: Answer, candidates: readonly CandidateRow[]): CandidateRow | undefined {
  if (answer.place !== null) return candidates.find(({ place }) => place === answer.place);
  return candidates
    .filter((candidate) => verdictsAgree(answer, candidate))
    .sort((a, b) => velocityBetweenKms(a.redshift, answer.redshift) - velocityBetweenKms(b.redshift, answer.redshift))
    .at(0);
}

function grouped<T extends { measurementId: string }>(rows: T[]): Map<string, T[]> {
  const groups = new Map<string, T[]>();
  for (const row of rows) {
    const group = groups.get(row.measurementId);
    if (group) group.push(row);
    else groups.set(row.measurementId, [row]);
  }
  return groups;
}

type Matched = { answer: Answer; candidate: CandidateRow | undefined };

/** Line fluxes of the candidates that the answers rest on, by measurement: an answer names one candidate of one. */
async function fluxesOf(matched: Matched[], transaction?: Transaction): Promise<Map<string, LineFluxRow[]>> {
  const byPlace = new Map<number, string[]>();
  for (const { candidate } of matched) {
    if (!candidate) continue;
    const ids = byPlace.get(candidate.place);
    if (ids) ids.push(candidate.measurementId);
    else byPlace.set(candidate.place, [candidate.measurementId]);
  }
  const rows: LineFluxRow[] = [];
  for (const [place, ids] of byPlace) rows.push(...(await lineFluxes(ids, place, PUBLISHED_LINES, transaction)));
  return grouped(rows);
}

/** Builds the rows that a selection of a programme's spectra gives now. */
export async function assembleRows(
  programmeId: string,
  selection: DraftSelection,
  transaction?: Transaction,
): Promise<AssembledRows> {
  const answers = await readAnswers(programmeId, selection, transaction);
  const ids = answers.chosen.flatMap(({ measurementId }) => (measurementId ? [measurementId] : []));
  const candidates = grouped(await candidatesOf(ids, transaction));
  const facts = new Map((await measurementFacts(ids, transaction)).map((fact) => [fact.measurementId, fact]));
  const matched = answers.chosen.map((answer) => ({
    answer,
    candidate: candidateOf(answer, candidates.get(answer.measurementId ?? '') ?? []),
  }));
  const fluxes = await fluxesOf(matched, transaction);
  const rows: StoredReleaseRow[] = [];
  const unplaced: string[] = [];
  for (const { answer, candidate } of matched) {
    const { spectrum, measurementId, redshift, confidence, decidedBy, verdictId, rulingId } = answer;
    if (spectrum.ra === null || spectrum.dec === null) {
      unplaced.push(spectrum.targetName);
      continue;
    }
    const lines = new Map((fluxes.get(candidate?.measurementId ?? '') ?? []).map((line) => [line.line, line]));
    rows.push({
      row: 0,
      name: spectrum.targetName,
      ra: spectrum.ra,
      dec: spectrum.dec,
      redshift,
      redshiftError: answer.redshiftError ?? (answer.place === null ? null : (candidate?.redshiftError ?? null)),
      confidence,
      probability: candidate?.probability ?? null,
      objectClass: candidate?.objectClass ?? null,
      decidedBy,
      ...publishedFluxes(lines, scaleToPublished(facts.get(measurementId ?? '')?.fluxUnit ?? null)),
      spectrum: spectrum.spectrumId,
      measurementId,
      verdictId,
      rulingId,
    });
  }
  rows.sort((a, b) => a.ra - b.ra || a.dec - b.dec || (a.name < b.name ? -1 : 1));
  rows.forEach((row, i) => (row.row = i + 1));
  const engineVersions = [...new Set([...facts.values()].map((fact) => fact.engineVersion))].sort();
  return { ...answers, rows, unplaced, engineVersions };
}
