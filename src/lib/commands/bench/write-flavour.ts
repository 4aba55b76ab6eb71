import { geodeticToItrs } from '$lib/domain/geodetic-position';
import type { RawSpectrum, Spectrum } from '$lib/domain/spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { barycentricVelocityKms, type Sighting } from '$lib/science/frames/barycentric';
import { vacuumToAir } from '$lib/science/frames/air-vacuum';
import { Random } from '$lib/science/simulate/random';
import { toRawSpectrum } from '$lib/science/simulate/transform-spectrum';
import type { Flavour } from './plan-spectra';

/** Place, time and direction of an exposure, drawn by seed; the site is the demo observatory's. */
export function drawSighting(seed: number): Sighting {
  const random = new Random(seed);
  return {
    raDegrees: random.uniform(0, 360),
    decDegrees: random.uniform(-80, 40),
    julianDateUtc: 2460000.5 + random.uniform(0, 1000),
    observatoryMetres: geodeticToItrs(-31.27, -70.81, 2380),
  };
}

/** Velocity that takes a flavour's wavelengths to the barycentre; 0 for barycentric ones. */
export function flavourVelocityKms(flavour: Flavour, seed: number): number {
  return flavour.startsWith('topocentric') ? barycentricVelocityKms(drawSighting(seed)) : 0;
}

/** The spectrum as a file of the flavour would say it. */
export function writeFlavour(spectrum: Spectrum, flavour: Flavour, seed: number): RawSpectrum {
  const raw = toRawSpectrum(spectrum, {
    medium: flavour.startsWith('air') ? 'air' : 'vacuum',
    wavelengthUnitAngstrom: flavour.includes('nm') ? 10 : flavour.includes('µm') ? 1e4 : 1,
    reversed: flavour.includes('reversed'),
  });
  if (!flavour.startsWith('topocentric')) return raw;
  const sighting = drawSighting(seed);
  const factor = 1 + barycentricVelocityKms(sighting) / SPEED_OF_LIGHT_KMS;
  const air = flavour.includes('air');
  return {
    ...raw,
    // the air stands at the observatory: first back to its frame, then into air
    wavelength: raw.wavelength.map((barycentric) => (air ? vacuumToAir(barycentric / factor) : barycentric / factor)),
    lsfSigmaAngstrom: raw.lsfSigmaAngstrom && raw.lsfSigmaAngstrom.map((sigma) => sigma / factor),
    raDegrees: sighting.raDegrees,
    decDegrees: sighting.decDegrees,
    frame: {
      medium: air ? 'air' : 'vacuum',
      specsys: 'TOPOCENT',
      midExposureJulianDateUtc: sighting.julianDateUtc,
      observatoryMetres: sighting.observatoryMetres && [...sighting.observatoryMetres],
    },
  };
}
