import { createHash } from 'node:crypto';
import type { Confidence } from '$lib/domain/confidence';
import type { Candidate, LineFit, Measurement } from '$lib/domain/measurement';
import { inTransaction } from '$lib/server/database/in-transaction';
import { storeFileContents } from '$lib/server/database/queries/files';
import { storeMeasurements } from '$lib/server/database/queries/measurements';
import { addFilesToNight, insertNight } from '$lib/server/database/queries/nights';
import { lineByName } from '$lib/science/constants/lines';

/** What a seeded spectrum is to be; what is left out is ordinary. */
export interface SeededSpectrum {
  /** Name of the target; two spectra may share one, and then have one place. */
  name: string;
  ra?: number | null;
  dec?: number | null;
  redshift?: number | null;
  redshiftError?: number;
  confidence?: Confidence;
  probability?: number;
  fluxUnit?: string | null;
  /** Fluxes of the first candidate's lines. */
  lines?: Record<string, number>;
  /** Start of the exposure, ISO 8601 UTC, and how long it is, s; 900 unless told. */
  start?: string;
  exposureSeconds?: number;
  /** A second candidate's redshift; its lines have ten times the flux. */
  rival?: number;
}

const CGS = '1e-17 erg s-1 cm-2 Angstrom-1';

function lineFit(line: string, redshift: number, flux: number): LineFit {
  const { wavelengthVacuum } = lineByName(line);
  return {
    line,
    wavelengthRest: wavelengthVacuum,
    wavelengthObserved: wavelengthVacuum * (1 + redshift),
    flux,
    fluxError: flux / 10,
    equivalentWidthRest: 20,
    equivalentWidthRestError: 2,
    fwhmKms: 180,
    fwhmKmsError: 12,
    signalToNoise: 10,
  };
}

function candidate(redshift: number, error: number, probability: number, lines: Record<string, number>): Candidate {
  return {
    redshift,
    redshiftError: error,
    probability,
    objectClass: 'star-forming',
    fwhmKms: 180,
    reasonsFor: [],
    reasonsAgainst: [],
    lines: Object.entries(lines).map(([line, flux]) => lineFit(line, redshift, flux)),
  };
}

export function seededMeasurement(spectrum: SeededSpectrum): Measurement {
  const { redshift = 0.3, redshiftError = 2e-5, confidence = 'secure', probability = 0.999, rival } = spectrum;
  const lines = spectrum.lines ?? { 'H-alpha 6565': 30, '[O III] 5008': 12 };
  const candidates = redshift === null ? [] : [candidate(redshift, redshiftError, probability, lines)];
  if (rival !== undefined) {
    const stronger = Object.fromEntries(Object.entries(lines).map(([line, flux]) => [line, 10 * flux]));
    candidates.push(candidate(rival, 3e-5, 1 - probability, stronger));
  }
  const answered = confidence !== 'none' && redshift !== null;
  return {
    redshift: answered ? redshift : null,
    redshiftError: answered ? redshiftError : null,
    redshiftErrorMeasured: answered ? redshiftError : null,
    redshiftSystemic: null,
    secondRedshift: null,
    probability,
    rivals: { nothing: 0, star: 0, passive: 0 },
    confidence,
    fluxUnit: spectrum.fluxUnit === undefined ? CGS : spectrum.fluxUnit,
    candidates,
    lines: answered ? candidates[0].lines : [],
    derived: null,
    reasons: [],
    flags: [],
    noiseFactor: 1,
    frame: { medium: 'vacuum', specsys: 'BARYCENT', barycentricKms: null },
    engine: { version: '1.0.0', lineList: '1', settings: 'f'.repeat(64) },
  };
}

/** A place of its own for each name, since one place is one target; within 4 degrees of 63. */
function raOfName(name: string): number {
  const digest = createHash('sha256').update(name).digest();
  return 63 + 4 * (digest.readUInt32BE(0) / 2 ** 32);
}

function spanOf(start: string, seconds: number) {
  const after = (share: number) => new Date(Date.parse(start) + share * seconds * 1000).toISOString();
  return { exposureStart: after(0), midExposure: after(0.5), exposureEnd: after(1) };
}

let files = 0;

/** Puts spectra and their measurements into a night of a programme as a file would; returns the ids of the spectra. */
export async function seedSpectra(
  programmeId: string,
  createdBy: string,
  spectra: SeededSpectrum[],
): Promise<string[]> {
  return (await seedNight(programmeId, createdBy, spectra)).spectrumIds;
}

/** As `seedSpectra`; names the night too. */
export async function seedNight(
  programmeId: string,
  createdBy: string,
  spectra: SeededSpectrum[],
): Promise<{ nightId: string; spectrumIds: string[] }> {
  const name = `seed-${++files}.fits`;
  const sha256 = createHash('sha256').update(`${programmeId} ${name}`).digest('hex');
  return inTransaction(async (transaction) => {
    const night = { programmeId, instrumentId: null };
    const id = await insertNight({ ...night, civilDate: '2026-11-14', notes: '', createdBy }, transaction);
    const [added] = await addFilesToNight({ id, ...night }, [{ name, sha256, sizeBytes: 1 }], transaction);
    const content = spectra.map(
      ({ name: target, ra = raOfName(target), dec = -31, start, exposureSeconds = 900 }, i) => ({
        extension: 1,
        row: i + 1,
        name: target,
        raDegrees: ra,
        decDegrees: dec,
        exposureSeconds,
        ...(start && spanOf(start, exposureSeconds)),
        pixelCount: 4000,
        wavelengthMin: 3800,
        wavelengthMax: 9200,
        medianSignalToNoise: 5,
        header: {},
        warnings: [],
      }),
    );
    const file = { id: added.id, programmeId, sha256, originalName: name, instrumentId: null, instrument: null };
    const [ids] = await storeFileContents([{ file, content: { spectra: content, problems: [] } }], transaction);
    const results = new Map(ids.map((spectrum, i) => [spectrum, { measurement: seededMeasurement(spectra[i]) }]));
    await storeMeasurements(results, transaction);
    return { nightId: id, spectrumIds: ids };
  });
}
