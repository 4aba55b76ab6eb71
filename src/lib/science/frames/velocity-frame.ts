import { geodeticToItrs } from '$lib/domain/geodetic-position';
import type { Instrument } from '$lib/domain/instrument';
import type { Medium, RawSpectrum } from '$lib/domain/spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { barycentricVelocityKms, heliocentricToBarycentricKms, type Sighting } from './barycentric';

/** How a spectrum's wavelengths become vacuum and barycentric. */
export interface VelocityFrame {
  medium: Medium | null;
  specsys: string | null;
  /** Velocity that makes the wavelengths barycentric, km/s; null where none is applied. */
  barycentricKms: number | null;
  /** Takes a barycentric wavelength to the observatory's frame. */
  observerFactor: number;
  /** True where medium or frame had to be assumed, or the data for the step are missing. */
  doubt: boolean;
  warnings: string[];
}

/** Default medium where neither file nor instrument says: vacuum, with the doubt said. */
const ASSUMED_MEDIUM = 'vacuum';

function observatory(raw: RawSpectrum, instrument?: Instrument): Sighting['observatoryMetres'] {
  if (raw.frame.observatoryMetres) return raw.frame.observatoryMetres;
  const site = instrument?.site;
  return site ? geodeticToItrs(site.latitudeDegrees, site.longitudeEastDegrees, site.heightMetres) : null;
}

function missing(raw: RawSpectrum, site: Sighting['observatoryMetres']): string[] {
  const parts: string[] = [];
  if (raw.raDegrees === null || raw.decDegrees === null) parts.push('RA and DEC');
  if (raw.frame.midExposureJulianDateUtc === null) parts.push('the time of the exposure');
  if (!site) parts.push('the position of the telescope');
  return parts;
}

/**
 * Decides medium and velocity frame: what the file says, else the instrument. Topocentric, geocentric and heliocentric
 * wavelengths are made barycentric where time, place and position allow; anything else is left as it is and doubted.
 * Velocity cards are never used.
 */
export function velocityFrame(raw: RawSpectrum, instrument?: Instrument): VelocityFrame {
  const medium = raw.frame.medium ?? instrument?.medium ?? null;
  const specsys = raw.frame.specsys ?? instrument?.specsys ?? null;
  const frame: VelocityFrame = {
    medium,
    specsys,
    barycentricKms: null,
    observerFactor: 1,
    doubt: raw.frame.wavelengthUnitAssumed === true,
    warnings: [],
  };
  if (!medium) {
    frame.doubt = true;
    frame.warnings.push(
      `Neither the file nor the instrument says whether wavelengths are in air or vacuum; ${ASSUMED_MEDIUM} is assumed (83 km/s if wrong).`,
    );
  }
  const site = observatory(raw, instrument);
  const lacking = missing(raw, site);
  const { raDegrees, decDegrees } = raw;
  const julianDateUtc = raw.frame.midExposureJulianDateUtc;
  const known = raDegrees !== null && decDegrees !== null && julianDateUtc !== null;
  const sighting = known ? { raDegrees, decDegrees, julianDateUtc } : null;
  const observerKms = sighting ? barycentricVelocityKms({ ...sighting, observatoryMetres: site }) : null;
  if (observerKms !== null) frame.observerFactor = 1 / (1 + observerKms / SPEED_OF_LIGHT_KMS);

  if (specsys === 'BARYCENT') return frame;
  if (specsys === 'TOPOCENT' && lacking.length === 0) frame.barycentricKms = observerKms;
  else if (specsys === 'TOPOCENT' && sighting) {
    // Without the telescope's place the motion of the Earth's centre still takes out all but its rotation.
    frame.barycentricKms = observerKms;
    frame.doubt = true;
    frame.warnings.push(
      "The position of the telescope is missing, so the Earth's rotation (0.5 km/s at most) stays in the wavelengths.",
    );
  } else if (specsys === 'GEOCENTR' && sighting)
    frame.barycentricKms = barycentricVelocityKms({ ...sighting, observatoryMetres: null });
  else if (specsys === 'HELIOCEN' && sighting) frame.barycentricKms = heliocentricToBarycentricKms(sighting);
  else if (specsys !== 'HELIOCEN') {
    // Heliocentric wavelengths without time or position pass for barycentric ones: they differ by 0.02 km/s at most.
    frame.doubt = true;
    frame.warnings.push(describeDoubt(specsys, lacking));
    // Untouched topocentric wavelengths are the observatory's own.
    if (specsys === 'TOPOCENT') frame.observerFactor = 1;
  }
  return frame;
}

function describeDoubt(specsys: string | null, lacking: string[]): string {
  if (specsys === null)
    return 'Neither the file nor the instrument says in which velocity frame the wavelengths are; barycentric is assumed (30 km/s if wrong).';
  if (specsys === 'TOPOCENT' || specsys === 'GEOCENTR') {
    return `The wavelengths are ${specsys === 'TOPOCENT' ? 'topocentric' : 'geocentric'} and could not be made barycentric: ${lacking.join(', ')} missing (30 km/s at most).`;
  }
  return `Wavelengths in the frame ${specsys.slice(0, 20)} are not turned into barycentric ones.`;
}
