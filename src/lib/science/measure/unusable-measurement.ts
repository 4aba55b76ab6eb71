import type { Measurement } from '$lib/domain/measurement';
import type { Spectrum } from '$lib/domain/spectrum';

/** The measurement of a spectrum in which too few pixels are usable: nothing claimed, and the reason said. */
export function unusableMeasurement(spectrum: Spectrum, engine: Measurement['engine']): Measurement {
  return {
    redshift: null,
    redshiftError: null,
    redshiftErrorMeasured: null,
    redshiftSystemic: null,
    secondRedshift: null,
    probability: 0,
    rivals: { nothing: 1, star: 0, passive: 0 },
    confidence: 'none',
    fluxUnit: spectrum.fluxUnit,
    candidates: [],
    lines: [],
    derived: null,
    reasons: ['Too few usable pixels: nearly all are masked, not finite, or have no variance.'],
    flags: ['bad pixels'],
    noiseFactor: 1,
    frame: { medium: spectrum.medium, specsys: spectrum.specsys, barycentricKms: spectrum.barycentricKms },
    engine,
  };
}
