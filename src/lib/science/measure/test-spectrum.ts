import type { Spectrum } from '$lib/domain/spectrum';
import { lineByName } from '../constants/lines';
import { normalCumulative } from './normal-distribution';

/** A plain spectrum for unit tests: flat continuum, Gaussian lines integrated over pixels, white noise from a seed. */
export interface TestSpectrumOptions {
  from?: number;
  to?: number;
  count?: number;
  redshift?: number;
  /** Line name to flux; continuum and noise below are in the same flux density unit. */
  lines?: Record<string, number>;
  sigmaKms?: number;
  continuum?: number;
  noise?: number;
  /** Scale of flux, noise and continuum. */
  scale?: number;
  resolvingPower?: number;
  seed?: number;
}

/** Uniform numbers in (0, 1): Park & Miller (1988, CACM 31, 1192). */
export function uniformNumbers(seed: number): () => number {
  let state = seed % 2147483647 || 1;
  return () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
}

/** Standard normal numbers by the Box-Muller transform. */
export function normalNumbers(seed: number): () => number {
  const uniform = uniformNumbers(seed);
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

/** Makes the spectrum. */
export function testSpectrum(options: TestSpectrumOptions = {}): Spectrum {
  const { from = 4000, to = 9000, count = 2500, redshift = 0.2, lines = {}, sigmaKms = 80 } = options;
  const { continuum = 5, noise = 1, scale = 1, resolvingPower = 1800, seed = 1 } = options;
  const normal = normalNumbers(seed);
  const step = (to - from) / count;
  const edges = Float64Array.from({ length: count + 1 }, (_, i) => from + i * step);
  const wavelength = Float64Array.from({ length: count }, (_, i) => from + (i + 0.5) * step);
  const lsfSigma = wavelength.map((w) => w / resolvingPower / 2.3548);
  const flux = wavelength.map(() => (continuum + noise * normal()) * scale);
  for (const [name, lineFlux] of Object.entries(lines)) {
    const centre = lineByName(name).wavelengthVacuum * (1 + redshift);
    const sigma = Math.hypot(centre / resolvingPower / 2.3548, (centre * sigmaKms) / 299792.458);
    for (let i = 0; i < count; i++) {
      const share = normalCumulative((edges[i + 1] - centre) / sigma) - normalCumulative((edges[i] - centre) / sigma);
      flux[i] += (lineFlux * scale * share) / step;
    }
  }
  return {
    name: 'test',
    wavelength,
    edges,
    flux,
    variance: wavelength.map(() => (noise * scale) ** 2),
    varianceKnown: true,
    sky: null,
    mask: new Uint16Array(count),
    lsfSigma,
    lsfSource: 'file',
    observerFactor: 1,
    barycentricKms: 0,
    medium: 'vacuum',
    specsys: 'BARYCENT',
    fluxUnit: null,
    fluxScaleCgs: null,
    wavelengthDoubt: false,
    warnings: [],
  };
}

/** Fluxes of an ordinary star-forming galaxy, H-alpha = 100 units. */
export const GALAXY_LINES: Record<string, number> = {
  'H-alpha 6565': 100,
  'H-beta 4863': 30,
  '[O III] 5008': 50,
  '[O III] 4960': 50 / 2.98,
  '[N II] 6585': 25,
  '[N II] 6550': 25 / 3.05,
  '[S II] 6718': 18,
  '[S II] 6733': 14,
  '[O II] 3727': 35,
  '[O II] 3730': 45,
};
