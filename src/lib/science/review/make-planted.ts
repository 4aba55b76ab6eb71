import type { Measurement } from '$lib/domain/measurement';
import type { Spectrum } from '$lib/domain/spectrum';
import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { estimateContinuum } from '$lib/science/measure/estimate-continuum';
import type { DetectorGrid } from '$lib/science/simulate/detector-grid';
import { drawActiveNucleus, drawStarForming } from '$lib/science/simulate/draw-object';
import { drawQuasar } from '$lib/science/simulate/draw-quasar';
import { EMISSION_WAVELENGTHS, type EmissionName } from '$lib/science/simulate/emission-lines';
import { blendFeatures, featureSignalToNoise } from '$lib/science/simulate/line-signal';
import { placeObject, type PlacedObject } from '$lib/science/simulate/object-on-pixels';
import { Random } from '$lib/science/simulate/random';
import type { ObjectRecipe } from '$lib/science/simulate/recipe';

/** A planted spectrum's flux on its donor's pixels, and the answer. */
export interface Planted {
  flux: Float64Array;
  /** null where nothing was put in. */
  redshift: number | null;
  /** What was put in, in words, for the record. */
  what: 'star-forming' | 'active nucleus' | 'quasar' | 'nothing';
  /** Matched-filter signal-to-noise ratio of the best feature; 0 for nothing. */
  signalToNoise: number;
}

const ANCHORS: Record<'star-forming' | 'active nucleus' | 'quasar', readonly EmissionName[]> = {
  'star-forming': ['H-alpha 6565', '[O III] 5008', '[O II] 3730', 'H-beta 4863'],
  'active nucleus': ['H-alpha 6565', '[O III] 5008', '[O II] 3730'],
  quasar: ['Mg II 2796', 'C III] 1909', 'C IV 1548'],
};
/** Whoever looks carefully can tell: fainter ones would measure luck. */
const SIGNAL_TO_NOISE = { low: 6, high: 25 };
/** A second feature of this signal-to-noise ratio settles which line the best one is. */
const SECOND_FEATURE = 4;
const TRIES = 60;

function gridOf({ wavelength, edges, lsfSigma }: Spectrum): DetectorGrid {
  const count = wavelength.length;
  return {
    centre: wavelength,
    lower: edges.slice(0, count),
    upper: edges.slice(1),
    lsfSigma,
    arm: new Uint8Array(count),
    place: Float64Array.from({ length: count }, (_, i) => i / Math.max(1, count - 1)),
  };
}

/**
 * What is left of a donor without its object: flux less continuum, turned upside down so that it is no copy, and where the engine saw a
 * line, noise of the declared variance instead. Sky residuals, bad pixels and correlation stay as the detector gave them.
 */
function emptied(donor: Spectrum, measurement: Pick<Measurement, 'candidates'>, random: Random): Float64Array {
  const { wavelength, flux, variance, lsfSigma } = donor;
  const continuum = estimateContinuum(donor);
  const left = Float64Array.from(flux, (value, i) => continuum[i] - value);
  const seen = measurement.candidates.flatMap(({ lines }) => lines).filter((line) => (line.signalToNoise ?? 0) > 2.5);
  for (const { wavelengthObserved, fwhmKms } of seen) {
    for (let i = 0; i < wavelength.length; i++) {
      const intrinsic = (wavelength[i] * (fwhmKms ?? 300)) / FWHM_PER_SIGMA / SPEED_OF_LIGHT_KMS;
      const reach = 4 * Math.hypot(lsfSigma[i], intrinsic);
      if (Math.abs(wavelength[i] - wavelengthObserved) < reach && Number.isFinite(variance[i])) {
        left[i] = random.normal(0, Math.sqrt(variance[i]));
      }
    }
  }
  return left;
}

/** An object whose best feature falls on usable pixels and whose second settles it; null where the draw gave none. */
function drawObject(grid: DetectorGrid, variance: Float64Array, random: Random): (PlacedLight & { z: number }) | null {
  const at = random.uniform();
  const what = at < 0.8 ? 'star-forming' : at < 0.94 ? 'active nucleus' : 'quasar';
  const { centre } = grid;
  const [first, last] = [centre[0], centre[centre.length - 1]];
  const wavelength = random.uniform(first + 0.05 * (last - first), last - 0.05 * (last - first));
  const z = wavelength / EMISSION_WAVELENGTHS[random.choice(ANCHORS[what])] - 1;
  if (z < 0.01 || z > 4) return null;
  const recipe: ObjectRecipe =
    what === 'star-forming'
      ? drawStarForming(random, z)
      : what === 'quasar'
        ? drawQuasar(random, z)
        : drawActiveNucleus(random, z, false);
  const object = placeObject(recipe, grid);
  const strengths = blendFeatures(object, grid)
    .map((feature) => featureSignalToNoise(feature, variance))
    .sort((a, b) => b - a);
  const signalToNoise = random.logUniform(SIGNAL_TO_NOISE.low, SIGNAL_TO_NOISE.high);
  const scale = signalToNoise / strengths[0];
  if (!(strengths[1] * scale >= SECOND_FEATURE)) return null;
  return { object, scale, what, signalToNoise, z };
}

interface PlacedLight {
  object: PlacedObject;
  scale: number;
  what: Planted['what'];
  signalToNoise: number;
}

/** One in five holds nothing, so that "no redshift" is tried too. */
const EMPTY_SHARE = 0.2;

/**
 * Makes a spectrum with a known answer out of a real one of the same night: its pixels, resolution, noise, sky and faults,
 * with its own object taken out and a simulated one put in (`science/simulate`). One in five is left empty.
 *
 * @param donor a measured spectrum, as the engine read it
 * @param measurement what the engine saw in it
 * @param seed the same donor and seed give the same spectrum
 */
export function makePlanted(donor: Spectrum, measurement: Pick<Measurement, 'candidates'>, seed: number): Planted {
  const random = new Random(seed);
  const left = emptied(donor, measurement, random);
  const grid = gridOf(donor);
  let light: (PlacedLight & { z: number }) | null = null;
  if (!random.chance(EMPTY_SHARE)) {
    for (let i = 0; i < TRIES && !light; i++) light = drawObject(grid, donor.variance, random);
  }
  const usable = (i: number) => Number.isFinite(donor.variance[i]);
  if (!light) {
    const flux = left.map((value, i) => (usable(i) ? value : 0));
    return { flux, redshift: null, what: 'nothing', signalToNoise: 0 };
  }
  const { object, scale, what, signalToNoise, z: redshift } = light;
  const flux = left.map((value, i) => (usable(i) ? value + scale * (object.emission[i] + object.continuum[i]) : 0));
  return { flux, redshift, what, signalToNoise };
}
