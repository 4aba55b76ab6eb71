import { geodeticToItrs } from '$lib/domain/geodetic-position';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { barycentricVelocityKms } from '$lib/science/frames/barycentric';
import type { DemoTarget } from './demo-targets';
import { Random } from './random';
import type { NoiseRecipe, Recipe } from './recipe';
import { SIMULATED_FLUX_UNIT, simulateSpectrum } from './simulate-spectrum';
import type { Truth } from './truth';

/** The invented observatory of the demo. */
export const DEMO_SITE = {
  name: 'Cape Halloran Observatory',
  latitudeDegrees: -31.27,
  longitudeEastDegrees: -70.81,
  heightMetres: 2380,
} as const;

/** The invented spectrograph of the demo: one arm, vacuum wavelengths, observatory's frame. */
export const DEMO_INSTRUMENT = {
  name: 'Halloran Fibre Spectrograph',
  start: 3700,
  end: 9800,
  stepAngstrom: 1.5,
  fwhmAngstrom: 3.4,
} as const;

/** One spectrum of the demo night, ready for a writer of FITS images. All arrays have one value a pixel. */
export interface DemoSpectrum {
  /** Name with a true minus sign, for people; `header.OBJECT` has it in ASCII. */
  name: string;
  /** File name without extension. */
  fileStem: string;
  raDegrees: number;
  decDegrees: number;
  /** Vacuum ångström in the observatory's frame, evenly spaced. */
  wavelength: Float64Array;
  flux: Float64Array;
  /** Standard deviation of flux; 0 where the pixel is dead. */
  error: Float64Array;
  sky: Float64Array;
  fluxUnit: string;
  /** FITS cards of the primary header: target, time, site, spectral axis of flux on axis 1. */
  header: Record<string, string | number>;
  truth: Truth;
}

const READOUT_SECONDS = 60;
const EXPOSURE_SECONDS = 900;
const EXPOSURES = 3;
const JULIAN_DATE_OF_UNIX_EPOCH = 2440587.5;
/** Fibres on empty sky whose mean is the sky spectrum: its noise is that much smaller. */
const SKY_FIBRES = 20;

/** A target with its place and the noise of its first three exposures. */
export interface PlacedDemoTarget {
  target: DemoTarget;
  raDegrees: number;
  decDegrees: number;
  /** As `positionName` writes it. */
  position: string;
  noise: NoiseRecipe;
}

/** Draws the noise of a spectrum of three exposures. */
export function drawDemoNoise(target: DemoTarget, random: Random): NoiseRecipe {
  return {
    level: random.uniform(0.05, 0.07),
    endRise: 0.8,
    skyLines: 30,
    skyResidual: random.normal(0, target.skyContaminated ? 0.05 : 0.006),
    skyShiftPixels: random.normal(0, target.skyContaminated ? 0.06 : 0.012),
    telluric: random.chance(0.3) ? random.uniform(0.2, 0.6) : 0,
    resampled: false,
    declaredErrorFactor: 1,
    cosmicRays: random.chance(0.25) ? random.integer(1, 3) : 0,
    badRuns: random.chance(0.2) ? 1 : 0,
    lsfError: 1,
  };
}

function recipeOf(target: DemoTarget, name: string, barycentricKms: number, noise: NoiseRecipe): Recipe {
  const { start, end, stepAngstrom, fwhmAngstrom } = DEMO_INSTRUMENT;
  return {
    name,
    class: target.class,
    objects: target.objects,
    arms: [
      {
        start,
        end,
        axis: 'linear',
        resolvingPower: (0.5 * (start + end)) / fwhmAngstrom,
        constantFwhm: true,
        pixelsPerFwhm: fwhmAngstrom / stepAngstrom,
      },
    ],
    noise,
    signalToNoise: target.signalToNoise,
    secondRatio: target.secondRatio,
    barycentricKms,
  };
}

/** How a target was observed. */
export interface DemoObservation {
  /** Start of the first exposure, Unix time in milliseconds. */
  startMs: number;
  /** Exposures of 900 s that went into it; three unless told. */
  exposures?: number;
  /** How far the wavelength scale is off, km/s; positive makes everything too red. */
  slipKms: number;
  seed: number;
}

/** Mid-exposure of so many exposures, with their readouts, Unix time in milliseconds. */
export const demoMiddleMs = (startMs: number, exposures = EXPOSURES) =>
  startMs + (1000 * (exposures * EXPOSURE_SECONDS + (exposures - 1) * READOUT_SECONDS)) / 2;

/** Start of the next exposure after so many. */
export const demoNextStartMs = (startMs: number, exposures = 1) =>
  startMs + 1000 * exposures * (EXPOSURE_SECONDS + READOUT_SECONDS);

/**
 * Observes a target: light, sky and noise on the detector's even axis, in the observatory's frame. Fewer exposures than
 * three show the same object with more noise. The sky spectrum is the mean of twenty fibres and has their noise.
 */
export function observeDemoTarget(
  { target, raDegrees, decDegrees, position, noise }: PlacedDemoTarget,
  { startMs, exposures = EXPOSURES, slipKms, seed }: DemoObservation,
): DemoSpectrum {
  const site = geodeticToItrs(DEMO_SITE.latitudeDegrees, DEMO_SITE.longitudeEastDegrees, DEMO_SITE.heightMetres);
  const time = (ms: number) => new Date(ms).toISOString().slice(0, -1);
  const middleMs = demoMiddleMs(startMs, exposures);
  const barycentricKms = barycentricVelocityKms({
    raDegrees,
    decDegrees,
    julianDateUtc: JULIAN_DATE_OF_UNIX_EPOCH + middleMs / 86_400_000,
    observatoryMetres: site,
  });
  const name = `HC ${position.replace('-', '\u2212')}`;
  // The simulator sets brightness by the wanted signal: both scale, so that the object stays as bright.
  const depth = Math.sqrt(exposures / EXPOSURES);
  const recipe = recipeOf(target, name, barycentricKms, { ...noise, level: noise.level / depth });
  recipe.signalToNoise *= depth;
  const { spectrum, truth } = simulateSpectrum(recipe, seed);
  const slip = 1 + slipKms / SPEED_OF_LIGHT_KMS;
  const wavelength = spectrum.wavelength.map((barycentric) => barycentric * spectrum.observerFactor * slip);
  const step = (wavelength[wavelength.length - 1] - wavelength[0]) / (wavelength.length - 1);
  const random = new Random(seed ^ 0x5ca1ab1e);
  const skyNoise = (i: number) =>
    Number.isFinite(spectrum.variance[i]) ? random.normal(0, Math.sqrt(spectrum.variance[i] / SKY_FIBRES)) : 0;
  return {
    name,
    fileStem: `hc-${position.toLowerCase().replace('+', 'p').replace('-', 'm').replace('.', '')}`,
    raDegrees,
    decDegrees,
    wavelength,
    flux: spectrum.flux,
    error: spectrum.variance.map((variance) => (Number.isFinite(variance) ? Math.sqrt(variance) : 0)),
    sky: (spectrum.sky ?? new Float64Array(wavelength.length)).map((value, i) => value + skyNoise(i)),
    fluxUnit: SIMULATED_FLUX_UNIT,
    truth,
    header: {
      OBJECT: `HC ${position}`,
      RADESYS: 'ICRS',
      RA: raDegrees,
      DEC: decDegrees,
      OBSERVAT: DEMO_SITE.name,
      INSTRUME: DEMO_INSTRUMENT.name,
      TIMESYS: 'UTC',
      'DATE-OBS': time(startMs),
      'DATE-AVG': time(middleMs),
      'DATE-END': time(2 * middleMs - startMs),
      XPOSURE: exposures * EXPOSURE_SECONDS,
      NEXPOSUR: exposures,
      'OBSGEO-X': Number(site[0].toFixed(3)),
      'OBSGEO-Y': Number(site[1].toFixed(3)),
      'OBSGEO-Z': Number(site[2].toFixed(3)),
      BUNIT: SIMULATED_FLUX_UNIT,
      CTYPE1: 'WAVE',
      CUNIT1: 'Angstrom',
      CRPIX1: 1,
      CRVAL1: wavelength[0],
      CDELT1: step,
      SPECSYS: 'TOPOCENT',
    },
  };
}

/** The mean of single exposures on one axis, as a pipeline stacks them; header and times from the first and last. */
export function stackDemoExposures(singles: readonly DemoSpectrum[]): DemoSpectrum {
  const [first] = singles;
  const count = singles.length;
  const mean = (of: (single: DemoSpectrum) => Float64Array) =>
    first.flux.map((_, i) => singles.reduce((sum, single) => sum + of(single)[i], 0) / count);
  const last = singles[count - 1].header;
  const [startMs, endMs] = [`${first.header['DATE-OBS']}Z`, `${last['DATE-END']}Z`].map(Date.parse);
  return {
    ...first,
    flux: mean(({ flux }) => flux),
    sky: mean(({ sky }) => sky),
    error: first.error.map((_, i) =>
      singles.some(({ error }) => error[i] === 0) ? 0 : Math.hypot(...singles.map(({ error }) => error[i])) / count,
    ),
    header: {
      ...first.header,
      'DATE-AVG': new Date((startMs + endMs) / 2).toISOString().slice(0, -1),
      'DATE-END': String(last['DATE-END']),
      XPOSURE: count * EXPOSURE_SECONDS,
      NEXPOSUR: count,
    },
  };
}
