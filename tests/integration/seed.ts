import { randomBytes } from 'node:crypto';
import type { Confidence } from '$lib/domain/confidence';
import type { Measurement } from '$lib/domain/measurement';
import { inTransaction } from '$lib/server/database/in-transaction';
import { findFile, storeFileContent } from '$lib/server/database/queries/files';
import { storeMeasurements } from '$lib/server/database/queries/measurements';
import { addFileToNight, insertNight } from '$lib/server/database/queries/nights';

const line = (name: string, wavelengthRest: number, redshift: number, flux: number) => ({
  line: name,
  wavelengthRest,
  wavelengthObserved: wavelengthRest * (1 + redshift),
  flux,
  fluxError: flux / 20,
  equivalentWidthRest: 30,
  equivalentWidthRestError: 1,
  fwhmKms: 200,
  fwhmKmsError: 5,
  signalToNoise: 20,
});

/** A measurement as the engine would write it, with two candidates; for tests of what happens to answers, not of answers. */
export function inventMeasurement(redshift: number, confidence: Confidence): Measurement {
  const candidate = (z: number, probability: number) => ({
    redshift: z,
    redshiftError: 0.0001,
    probability,
    objectClass: 'star-forming' as const,
    fwhmKms: 200,
    reasonsFor: ['H-alpha and [O III] 5008 agree'],
    reasonsAgainst: [],
    lines: [line('H-alpha 6565', 6564.63, z, 12), line('[O III] 5008', 5008.24, z, 8)],
  });
  const candidates = [candidate(redshift, 0.9), candidate(redshift + 0.4, 0.05)];
  return {
    redshift: confidence === 'none' ? null : redshift,
    redshiftError: confidence === 'none' ? null : 0.0001,
    redshiftErrorMeasured: 0.0001,
    redshiftSystemic: null,
    secondRedshift: null,
    probability: 0.9,
    rivals: { nothing: 0.03, star: 0.01, passive: 0.01 },
    confidence,
    fluxUnit: '1e-17 erg s-1 cm-2 Angstrom-1',
    candidates,
    lines: confidence === 'none' ? [] : candidates[0].lines,
    derived: null,
    reasons: [],
    flags: [],
    noiseFactor: 1,
    frame: { medium: 'vacuum', specsys: 'BARYCENT', barycentricKms: null },
    engine: { version: 'test', lineList: 'test', settings: 'test' },
  };
}

export interface SeedSpectrum {
  name: string;
  ra: number | null;
  dec: number | null;
  redshift: number;
  confidence: Confidence;
}

/** A night of measured spectra, one file each, written by the same queries that jobs use. Returns ids in order. */
export async function seedNight(programmeId: string, userId: string, spectra: SeedSpectrum[]) {
  return inTransaction(async (transaction) => {
    const night = { programmeId, instrumentId: null, civilDate: '2026-11-14', notes: '', createdBy: userId };
    const nightId = await insertNight(night, transaction);
    const spectrumIds: string[] = [];
    for (const { name, ra, dec, redshift, confidence } of spectra) {
      const sha256 = randomBytes(32).toString('hex');
      const added = {
        night: { id: nightId, programmeId, instrumentId: null },
        name: `${name}.fits`,
        sha256,
        sizeBytes: 1,
      };
      const { id: fileId } = await addFileToNight(added, transaction);
      const file = { ...(await findFileIn(fileId, programmeId, sha256, name)), id: fileId };
      const summary = {
        extension: 1,
        row: 1,
        name,
        raDegrees: ra,
        decDegrees: dec,
        exposureSeconds: 900,
        pixelCount: 4000,
        wavelengthMin: 4000,
        wavelengthMax: 9000,
        medianSignalToNoise: 5,
        header: {},
        warnings: [],
      };
      const [spectrumId] = await storeFileContent(file, { spectra: [summary], problems: [] }, transaction);
      await storeMeasurements(
        new Map([[spectrumId, { measurement: inventMeasurement(redshift, confidence) }]]),
        transaction,
      );
      spectrumIds.push(spectrumId);
    }
    return { nightId, spectrumIds };
  });
}

// The file's row is not visible outside its transaction yet.
async function findFileIn(id: string, programmeId: string, sha256: string, originalName: string) {
  return (await findFile(id)) ?? { id, programmeId, sha256, originalName, state: 'waiting', instrument: null };
}
