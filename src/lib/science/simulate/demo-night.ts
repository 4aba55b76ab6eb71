import { geodeticToItrs } from '$lib/domain/geodetic-position';
import { barycentricVelocityKms } from '$lib/science/frames/barycentric';
import { drawDemoTargets, type DemoTarget } from './demo-targets';
import { Random } from './random';
import type { Recipe } from './recipe';
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

/** Seed that the demo uses. */
export const DEMO_SEED = 20260914;

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

/** Fields of the night: centre and start of the first exposure, UTC; each near the meridian from this site then. */
const FIELDS = [
  { raDegrees: 305.4, decDegrees: -32.4, start: '2026-09-15T00:24:10' },
  { raDegrees: 338.1, decDegrees: -28.9, start: '2026-09-15T02:11:35' },
  { raDegrees: 9.8, decDegrees: -34.7, start: '2026-09-15T04:02:50' },
  { raDegrees: 38.9, decDegrees: -30.2, start: '2026-09-15T05:49:05' },
  { raDegrees: 63.2, decDegrees: -31.3, start: '2026-09-15T07:36:40' },
] as const;
const FIELD_RADIUS_DEGREES = 0.45;
const JULIAN_DATE_OF_UNIX_EPOCH = 2440587.5;

function pad(value: number, digits: number): string {
  return String(value).padStart(digits, '0');
}

/** `J0412.6-3120`: right ascension cut to tenths of a minute, declination to minutes, as the IAU asks (cut, not rounded). */
export function positionName(raDegrees: number, decDegrees: number): string {
  const tenths = Math.floor((raDegrees / 15) * 600 + 1e-9);
  const hours = Math.floor(tenths / 600);
  const minutes = (tenths - hours * 600) / 10;
  const arcMinutes = Math.floor(Math.abs(decDegrees) * 60 + 1e-9);
  const sign = decDegrees < 0 ? '-' : '+';
  const minuteText = minutes.toFixed(1).padStart(4, '0');
  return `J${pad(hours, 2)}${minuteText}${sign}${pad(Math.floor(arcMinutes / 60), 2)}${pad(arcMinutes % 60, 2)}`;
}

function place(field: (typeof FIELDS)[number], taken: Set<string>, random: Random): [number, number, string] {
  for (;;) {
    const radius = FIELD_RADIUS_DEGREES * Math.sqrt(random.uniform());
    const angle = random.uniform(0, 2 * Math.PI);
    const dec = field.decDegrees + radius * Math.sin(angle);
    const ra = field.raDegrees + (radius * Math.cos(angle)) / Math.cos((dec * Math.PI) / 180);
    const name = positionName(ra, dec);
    if (taken.has(name)) continue;
    taken.add(name);
    // a catalogue lists positions to 0.1 arcsec
    return [Number(ra.toFixed(5)), Number(dec.toFixed(5)), name];
  }
}

function recipeOf(target: DemoTarget, name: string, barycentricKms: number, random: Random): Recipe {
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
    noise: {
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
    },
    signalToNoise: target.signalToNoise,
    secondRatio: target.secondRatio,
    barycentricKms,
  };
}

/**
 * One invented night of the demo observatory: 120 spectra in five fields, three exposures of 900 s each, from evening to morning. Seven in
 * ten are star-forming galaxies between z = 0.05 and 1.5; the rest are active nuclei, quasars, Lyman-alpha emitters, passive galaxies,
 * stars, sky, blends and lone lines. Everything follows from the seed.
 *
 * @param seed the demo's own when left out
 */
export function demoNight(seed = DEMO_SEED): DemoSpectrum[] {
  const random = new Random(seed);
  const targets = drawDemoTargets(random);
  const site = geodeticToItrs(DEMO_SITE.latitudeDegrees, DEMO_SITE.longitudeEastDegrees, DEMO_SITE.heightMetres);
  const taken = new Set<string>();
  const elapsed = EXPOSURES * EXPOSURE_SECONDS + (EXPOSURES - 1) * READOUT_SECONDS;
  return targets.map((target, i) => {
    const field = FIELDS[Math.floor((i * FIELDS.length) / targets.length)];
    const [raDegrees, decDegrees, position] = place(field, taken, random);
    const startMs = Date.parse(`${field.start}Z`);
    const time = (ms: number) => new Date(ms).toISOString().slice(0, -1);
    const middleMs = startMs + (elapsed * 1000) / 2;
    const barycentricKms = barycentricVelocityKms({
      raDegrees,
      decDegrees,
      julianDateUtc: JULIAN_DATE_OF_UNIX_EPOCH + middleMs / 86_400_000,
      observatoryMetres: site,
    });
    const name = `HC ${position.replace('-', '\u2212')}`;
    const recipe = recipeOf(target, name, barycentricKms, random);
    const { spectrum, truth } = simulateSpectrum(recipe, random.integer(1, 2 ** 31));
    const wavelength = spectrum.wavelength.map((barycentric) => barycentric * spectrum.observerFactor);
    const step = (wavelength[wavelength.length - 1] - wavelength[0]) / (wavelength.length - 1);
    return {
      name,
      fileStem: `hc-${position.toLowerCase().replace('+', 'p').replace('-', 'm').replace('.', '')}`,
      raDegrees,
      decDegrees,
      wavelength,
      flux: spectrum.flux,
      error: spectrum.variance.map((variance) => (Number.isFinite(variance) ? Math.sqrt(variance) : 0)),
      sky: spectrum.sky ?? new Float64Array(wavelength.length),
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
        'DATE-END': time(startMs + elapsed * 1000),
        XPOSURE: EXPOSURES * EXPOSURE_SECONDS,
        NEXPOSUR: EXPOSURES,
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
  });
}
