import type { Instrument } from '$lib/domain/instrument';
import type { Measurement } from '$lib/domain/measurement';
import type { RawSpectrum, Spectrum } from '$lib/domain/spectrum';
import { readSpectra } from '$lib/formats/read-spectra';
import { writeSpectrumFits } from '$lib/formats/write-spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { vacuumToAir } from '$lib/science/frames/air-vacuum';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { makePlanted, type Planted } from '$lib/science/review/make-planted';

const UNIX_EPOCH_JULIAN_DATE = 2440587.5;
const timeOf = (julianDate: number) =>
  new Date((julianDate - UNIX_EPOCH_JULIAN_DATE) * 86_400_000).toISOString().slice(0, -1);

/** A planted spectrum as the bytes of a file, read back once. */
export interface WrittenPlanted {
  planted: Planted;
  bytes: Uint8Array;
  raw: RawSpectrum;
  spectrum: Spectrum;
}

/** Wavelengths as the donor's own file has them: its medium and velocity frame, so that what is read back is the same. */
function asInFile({ wavelength, barycentricKms, medium }: Spectrum): Float64Array {
  const factor = 1 + (barycentricKms ?? 0) / SPEED_OF_LIGHT_KMS;
  return wavelength.map((value) => (medium === 'air' ? vacuumToAir(value / factor) : value / factor));
}

/**
 * Makes a planted spectrum of a donor and writes it as a file that is read by the same instrument to the same pixels,
 * frame, resolution and unit. Null where that does not come out, so that nothing about it can be told from the donor's.
 */
export function writePlanted(
  raw: RawSpectrum,
  measurement: Measurement,
  instrument: Instrument | undefined,
  name: string,
  seed: number,
): WrittenPlanted | null {
  const donor = toSpectrum(raw, instrument);
  if (donor.wavelengthDoubt || donor.medium === null || !donor.varianceKnown) return null;
  const planted = makePlanted(donor, measurement, seed);
  const { midExposureJulianDateUtc, observatoryMetres } = raw.frame;
  const middle = midExposureJulianDateUtc;
  const bytes = writeSpectrumFits({
    ...{ name, wavelength: asInFile(donor), medium: donor.medium, flux: planted.flux, fluxUnit: raw.fluxUnit },
    specsys:
      donor.barycentricKms === null
        ? (donor.specsys ?? 'BARYCENT')
        : (raw.frame.specsys ?? donor.specsys ?? 'TOPOCENT'),
    error: donor.variance.map((variance) => (Number.isFinite(variance) ? Math.sqrt(variance) : 0)),
    sky: donor.sky && donor.sky.map((value) => (Number.isFinite(value) ? value : 0)),
    mask: donor.variance.map((variance) => (Number.isFinite(variance) ? 0 : 1)),
    ...{ raDegrees: raw.raDegrees, decDegrees: raw.decDegrees, observatoryMetres },
    exposureSeconds: raw.exposureSeconds,
    dateObs: middle === null ? null : timeOf(middle - (raw.exposureSeconds ?? 0) / 2 / 86_400),
    resolvingPower: raw.resolvingPower,
    cards: middle === null ? {} : { 'DATE-AVG': timeOf(middle) },
  });
  const { spectra } = readSpectra(bytes, `${name}.fits`, instrument);
  if (spectra.length !== 1) return null;
  const spectrum = toSpectrum(spectra[0], instrument);
  return isAlike(spectrum, donor) ? { planted, bytes, raw: spectra[0], spectrum } : null;
}

function isAlike(made: Spectrum, donor: Spectrum): boolean {
  if (made.wavelength.length !== donor.wavelength.length || made.lsfSource !== donor.lsfSource) return false;
  if (made.medium !== donor.medium || made.specsys !== donor.specsys || made.fluxUnit !== donor.fluxUnit) return false;
  if ((made.sky === null) !== (donor.sky === null)) return false;
  const velocity = Math.abs((made.barycentricKms ?? 0) - (donor.barycentricKms ?? 0));
  const near = (a: number, b: number, part: number) => Math.abs(a - b) <= part * Math.abs(b);
  const alike = donor.wavelength.every(
    (value, i) => near(made.wavelength[i], value, 1e-7) && near(made.lsfSigma[i], donor.lsfSigma[i], 0.02),
  );
  return alike && velocity < 0.01;
}
