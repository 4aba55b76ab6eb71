import { lineByName } from '../constants/lines';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FilterBank } from './detect';
import { familyEvidence, openReference } from './evidence';
import { CONTINUUM_FAULT } from './continuum-fault';
import type { ScanLine } from './scan';

/** A kind of stellar spectrum: features with typical equivalent widths (relative) and scatters in ln. */
export interface AbsorptionFamily {
  name: string;
  /** Rest wavelength, vacuum ångström, to [relative strength, scatter]. */
  features: readonly (readonly [number, number, number])[];
  /** Which bank sees its features: lines or bands. */
  wide: boolean;
  /** Seen only in stars: tried at rest alone. */
  starOnly: boolean;
}

const at = (name: string) => lineByName(name).wavelengthVacuum;

/** Paschen lines of stars as hot as A: rest wavelength and equivalent width; common practice, no single source. */
const PASCHEN: readonly (readonly [number, number])[] = [
  [at('Paschen-14 8601'), 2.5],
  [at('Paschen-iota 8753'), 3],
  [at('Paschen-theta 8865'), 3.5],
  [at('Paschen-eta 9017'), 4],
];

/*
 * Strengths: equivalent widths of old and young stellar populations in ångström, common practice (Lick-type indices of
 * Worthey et al. 1994, rounded, from memory). TiO: heads of the gamma and gamma' systems (Gray & Corbally 2009, from
 * memory) plus 45 Å, since the bands degrade to the red.
 */
export const ABSORPTION_FAMILIES: readonly AbsorptionFamily[] = [
  {
    name: 'old stars',
    wide: false,
    starOnly: false,
    features: [
      [at('Ca II K 3935'), 7, 0.5],
      [at('Ca II H 3970'), 6, 0.5],
      [at('Ca I 4228'), 1.2, 0.7],
      [at('G band 4306'), 5, 0.5],
      [at('H-beta 4863'), 1.6, 0.7],
      [5175.4, 4, 0.6],
      [at('Fe I 5272'), 2.5, 0.5],
      [at('Fe I 5337'), 2.2, 0.5],
      [5893.5, 3, 0.7],
      [at('H-alpha 6565'), 1.2, 0.8],
      [at('Ca II 8500'), 1.5, 0.5],
      [at('Ca II 8544'), 3.2, 0.5],
      [at('Ca II 8665'), 2.7, 0.5],
    ],
  },
  {
    name: 'young stars',
    wide: false,
    starOnly: false,
    features: [
      [at('H-zeta 3890'), 6, 0.5],
      [at('H-eta 3836'), 5, 0.5],
      [at('H-theta 3799'), 4, 0.6],
      [at('H-epsilon 3971'), 7, 0.4],
      [at('Ca II K 3935'), 2, 1],
      [at('H-delta 4103'), 7, 0.4],
      [at('H-gamma 4342'), 6.5, 0.4],
      [at('H-beta 4863'), 6, 0.4],
      [at('H-alpha 6565'), 4.5, 0.5],
    ],
  },
  {
    name: 'sun-like star',
    wide: false,
    starOnly: true,
    features: [
      [at('Ca II K 3935'), 6, 0.7],
      [at('Ca II H 3970'), 6, 0.6],
      [at('H-delta 4103'), 2.5, 0.8],
      [at('G band 4306'), 4, 0.6],
      [at('H-gamma 4342'), 2.5, 0.8],
      [at('H-beta 4863'), 3, 0.7],
      [5175.4, 3, 0.7],
      [at('Fe I 5272'), 2, 0.7],
      [at('Fe I 5337'), 1.8, 0.7],
      [5893.5, 2.5, 0.8],
      [at('H-alpha 6565'), 2.5, 0.7],
      [at('Ca II 8500'), 1.4, 0.5],
      [at('Ca II 8544'), 3.2, 0.5],
      [at('Ca II 8665'), 3, 0.5],
      ...PASCHEN.map(([rest, strength]) => [rest, 0.4 * strength, 0.8] as const),
    ],
  },
  {
    name: 'hot star',
    wide: true,
    starOnly: true,
    features: [
      [at('H-zeta 3890'), 7, 0.5],
      [at('H-epsilon 3971'), 9, 0.4],
      [at('H-delta 4103'), 10, 0.4],
      [at('H-gamma 4342'), 10, 0.4],
      [at('H-beta 4863'), 10, 0.4],
      [at('H-alpha 6565'), 8, 0.5],
      ...PASCHEN.map(([rest, strength]) => [rest, strength, 0.6] as const),
    ],
  },
  {
    name: 'cool star',
    wide: true,
    starOnly: true,
    features: [
      [4806, 12, 0.8],
      [5000, 15, 0.6],
      [5213, 16, 0.6],
      [5494, 14, 0.7],
      [5908, 16, 0.6],
      [6206, 22, 0.5],
      [6698, 18, 0.6],
      [7101, 28, 0.5],
      [7636, 26, 0.6],
      [8479, 20, 0.6],
      [8906, 16, 0.8],
    ],
  },
];

/** No galaxy's stars move more slowly. */
const LEAST_GALAXY_SIGMA_KMS = 150;

/** Absorption features for the scan over redshift. */
export const ABSORPTION_SCAN_LINES: readonly ScanLine[] = [
  ...ABSORPTION_FAMILIES[0].features.map(([rest, strength]) => ({
    logRest: Math.log(rest),
    presence: strength >= 3 ? 0.75 : 0.25,
  })),
  ...['H-delta 4103', 'H-gamma 4342', 'H-zeta 3890', 'H-eta 3836'].map((name) => ({
    logRest: Math.log(at(name)),
    presence: 0.25,
  })),
];

/** Strong features from which on absorption settles a redshift; fewer may be a quasar's troughs. */
export const SETTLED_FEATURES = 4;

/** What absorption says of one redshift. */
export interface AbsorptionEvidence {
  /** Log evidence against a featureless continuum at this redshift, not integrated over redshift. */
  logEvidence: number;
  family: string;
  /** Whether it rests on wide features. */
  wide: boolean;
  /** Features deeper than 4 sigma. */
  strongFeatures: number;
  sigmaKms: number;
}

/**
 * Log evidence of stellar absorption at one redshift, best over families and widths: the filters' negative numerators
 * under log-normal ratio priors (see `familyEvidence`).
 *
 * @param banks filters for lines and for bands
 * @param star whether families seen only in stars take part
 * @param level continuum at an observed wavelength
 * @param noiseFactors scales of the errors that hypotheses of narrow and of wide features share; the filters' own is undone
 */
export function absorptionEvidence(
  banks: { lines: FilterBank; bands: FilterBank },
  logScale: number,
  relativeResolution: number,
  logNoiseFlux: number,
  star: boolean,
  noiseFactors: { lines: number; bands: number },
  level: (wavelength: number) => number,
): AbsorptionEvidence {
  let best: AbsorptionEvidence = {
    logEvidence: -Infinity,
    family: 'none',
    wide: false,
    strongFeatures: 0,
    sigmaKms: 0,
  };
  for (const family of ABSORPTION_FAMILIES) {
    if (family.starOnly && !star) continue;
    const bank = family.wide ? banks.bands : banks.lines;
    for (const filter of bank.filters) {
      if (!star && filter.sigmaKms < LEAST_GALAXY_SIGMA_KMS) continue;
      const rescale = (filter.noiseFactor / (family.wide ? noiseFactors.bands : noiseFactors.lines)) ** 2;
      const right: number[] = [];
      const information: number[] = [];
      const position: number[] = [];
      const logRatio: number[] = [];
      const scatter: number[] = [];
      let strong = 0;
      for (const [rest, strength, spread] of family.features) {
        const node = (Math.log(rest) + logScale - bank.start) / bank.step;
        const k = Math.round(node);
        if (k < 0 || k >= bank.count || !(filter.information[k] > 0)) continue;
        // Nothing can be taken from light that is not there: a dip below no continuum is no absorption.
        const light = level(rest * Math.exp(logScale));
        if (!(light > 0)) continue;
        const width =
          2.3548 * Math.hypot(relativeResolution, filter.sigmaKms / SPEED_OF_LIGHT_KMS) * rest * Math.exp(logScale);
        const fault = (CONTINUUM_FAULT[family.wide ? 1 : 0] * light * width) ** 2;
        const info = filter.information[k] * rescale;
        right.push((-filter.numerator[k] * rescale) / (1 + info * fault));
        information.push(info / (1 + info * fault));
        position.push(Math.log(rest));
        logRatio.push(Math.log(strength));
        scatter.push(spread);
        const depth = right[right.length - 1] / Math.sqrt(information[information.length - 1]);
        if (depth > 4) strong++;
      }
      const count = right.length;
      if (count < 2) continue;
      const sigma = Math.hypot(relativeResolution, filter.sigmaKms / SPEED_OF_LIGHT_KMS);
      const gram = new Float64Array(count * count);
      for (let i = 0; i < count; i++) {
        for (let j = 0; j < count; j++) {
          const apart = (position[i] - position[j]) / sigma;
          gram[i * count + j] = Math.sqrt(information[i] * information[j]) * Math.exp(-0.25 * apart * apart);
        }
        gram[i * count + i] *= 1.0001;
      }
      const { logEvidence } = familyEvidence(
        { count, gram, right: Float64Array.from(right) },
        { logRatio: Float64Array.from(logRatio), scatter: Float64Array.from(scatter) },
        openReference(logNoiseFlux),
      );
      if (logEvidence > best.logEvidence) {
        best = {
          logEvidence,
          family: family.name,
          wide: family.wide,
          strongFeatures: strong,
          sigmaKms: filter.sigmaKms,
        };
      }
    }
  }
  return best;
}
