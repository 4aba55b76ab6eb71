import { describe, expect, it } from 'vitest';
import type { ReleaseRow } from '$lib/domain/release';
import { chooseSpectra } from './choose-spectra';
import { decideSpectrum, type Answer, type JudgedSpectrum, type StandingVerdict } from './decide-spectrum';
import { findDuplicates } from './find-duplicates';
import { summariseRows } from './summarise-rows';

const selection = { confidence: ['secure' as const], engineAlone: true };
const verdict = (id: string, redshift: number | null, more: Partial<StandingVerdict> = {}): StandingVerdict => ({
  id,
  userId: id,
  measurementId: 'm',
  kind: redshift === null ? 'no redshift' : 'candidate',
  redshift,
  redshiftError: 1e-5,
  candidatePlace: redshift === null ? null : 1,
  confidence: redshift === null ? null : 'secure',
  restores: null,
  ...more,
});
const spectrum = (more: Partial<JudgedSpectrum> = {}): JudgedSpectrum => ({
  spectrumId: 's1',
  targetId: 't',
  targetName: 'T',
  ra: 10,
  dec: -10,
  measurementId: 'm',
  redshift: 0.3,
  redshiftError: 1e-5,
  probability: 0.999,
  confidence: 'secure',
  verdicts: [],
  ruling: null,
  ...more,
});

describe('decideSpectrum', () => {
  it('finds the open question between the first and the last of three, though both agree with the second', () => {
    const verdicts = [verdict('a', 0.3), verdict('b', 0.3012), verdict('c', 0.3024)];
    expect(decideSpectrum(spectrum({ verdicts: verdicts.slice(0, 2) }), selection)).toMatchObject({ redshift: 0.3012 });
    expect(decideSpectrum(spectrum({ verdicts }), selection)).toBe('open question');
  });

  it('takes a ruling over the verdicts that differ, and opens the question again for a later one', () => {
    const verdicts = [verdict('a', 0.3), verdict('b', 0.7)];
    const ruling = { ...verdict('c', 0.3), verdictId: 'a' };
    expect(decideSpectrum(spectrum({ verdicts, ruling }), selection)).toMatchObject({
      decidedBy: 'people',
      redshift: 0.3,
      verdictId: 'a',
      rulingId: 'c',
    });
    expect(decideSpectrum(spectrum({ verdicts, ruling: { ...ruling, redshift: null } }), selection)).toBe(
      'no redshift',
    );
    expect(decideSpectrum(spectrum({ verdicts: [...verdicts, verdict('d', 0.9)], ruling }), selection)).toBe(
      'open question',
    );
  });

  it('takes the engine only where nobody has judged and the selection says so', () => {
    expect(decideSpectrum(spectrum(), selection)).toMatchObject({ decidedBy: 'engine', place: 0 });
    expect(decideSpectrum(spectrum(), { ...selection, engineAlone: false })).toBe('not judged');
    expect(decideSpectrum(spectrum({ verdicts: [verdict('a', null)] }), selection)).toBe('no redshift');
    expect(decideSpectrum(spectrum({ verdicts: [verdict('a', 0.7)] }), selection)).toMatchObject({
      decidedBy: 'people',
      place: 1,
      redshift: 0.7,
    });
  });

  it('never publishes none, nor a word that the selection leaves out', () => {
    expect(decideSpectrum(spectrum({ confidence: 'none', redshift: null }), selection)).toBe('no redshift');
    expect(decideSpectrum(spectrum({ confidence: 'probable' }), selection)).toBe('other confidence');
    const unsure = [verdict('a', 0.3, { confidence: 'ambiguous' })];
    expect(decideSpectrum(spectrum({ verdicts: unsure }), selection)).toBe('other confidence');
    expect(decideSpectrum(spectrum({ confidence: null, redshift: null }), selection)).toBe('nothing measured');
    expect(decideSpectrum(spectrum(), { ...selection, leaveOut: ['T'] })).toBe('left out');
  });
});

describe('chooseSpectra', () => {
  const answer = (id: string, more: Partial<Answer>, probability = 0.999) =>
    ({ ...(decideSpectrum(spectrum({ spectrumId: id, probability }), selection) as Answer), ...more }) as Answer;

  it('puts people before the engine, then the better word, then probability, whatever the order', () => {
    const answers = [
      answer('s1', {}, 0.9999),
      answer('s2', { decidedBy: 'people', confidence: 'probable' }, 0.5),
      answer('s3', { decidedBy: 'people', confidence: 'secure' }, 0.4),
      answer('s4', { decidedBy: 'people', confidence: 'secure' }, 0.6),
    ];
    for (const order of [answers, [...answers].reverse()]) {
      const { chosen, targetsWithChoice } = chooseSpectra(order);
      expect(chosen.map((one) => one.spectrum.spectrumId)).toEqual(['s4']);
      expect(targetsWithChoice).toBe(1);
    }
  });
});

describe('findDuplicates', () => {
  it('sees across 0 h and counts arcseconds on the sky, not in right ascension', () => {
    const places = [
      { name: 'A', ra: 359.9999, dec: 60 },
      { name: 'B', ra: 0.0004, dec: 60 },
      { name: 'C', ra: 0.0009, dec: 60 },
    ];
    // 0.0005 deg of right ascension is 0.9 arcsec at declination 60
    expect(findDuplicates(places)).toMatchObject([
      { names: ['A', 'B'], separationArcsec: expect.closeTo(0.9, 3) },
      { names: ['B', 'C'], separationArcsec: expect.closeTo(0.9, 3) },
    ]);
    expect(findDuplicates(places, [['B', 'A']])).toHaveLength(1);
    expect(findDuplicates([])).toEqual([]);
  });
});

describe('summariseRows', () => {
  const row = (redshift: number, more: Partial<ReleaseRow> = {}) =>
    ({
      redshift,
      redshiftError: 1e-4 * (1 + redshift),
      confidence: 'secure',
      decidedBy: 'people',
      ...more,
    }) as ReleaseRow;

  it('gives counts, range, and the median of c sigma / (1+z) over rows that have an error', () => {
    const rows = [row(0.02), row(0.5, { confidence: 'probable' }), row(1.46, { redshiftError: null })];
    const summary = summariseRows(rows);
    expect(summary).toMatchObject({
      confidence: { secure: 2, probable: 1, ambiguous: 0 },
      redshiftRange: [0.02, 1.46],
      medianVelocityErrorKms: expect.closeTo(29.979, 3),
    });
  });

  it('has no range and no median without rows', () => {
    expect(summariseRows([])).toMatchObject({ redshiftRange: null, medianVelocityErrorKms: null });
  });
});
