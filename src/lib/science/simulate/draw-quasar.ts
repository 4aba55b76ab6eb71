import { FWHM_PER_SIGMA } from '$lib/science/constants/physical';
import { EMISSION_WAVELENGTHS, type EmissionName } from './emission-lines';
import { activeNucleusRatios } from './line-ratios';
import { continuum, narrowLines } from './draw-object';
import type { Random } from './random';
import type { LineRecipe, ObjectRecipe } from './recipe';

/** Broad line: rest equivalent width range in ångström, mean velocity shift and its scatter in km/s, width relative to Mg II. */
const BROAD: readonly (readonly [EmissionName, number, number, number, number, number])[] = [
  ['Lyman-alpha 1216', 40, 110, 100, 200, 1],
  ['N V 1239', 10, 30, -100, 300, 1.1],
  ['Si IV 1394', 5, 14, -300, 350, 1.1],
  ['C IV 1548', 18, 60, -700, 450, 1.1],
  ['Al III 1857', 1, 4, -100, 300, 1],
  ['C III] 1909', 12, 32, -200, 300, 1.15],
  ['Mg II 2796', 18, 55, 0, 150, 1],
  ['H-delta 4103', 6, 16, 50, 250, 1],
  ['H-gamma 4342', 12, 30, 50, 250, 1],
  ['H-beta 4863', 35, 100, 60, 220, 1],
  ['He I 5877', 3, 9, 50, 250, 1],
  ['H-alpha 6565', 120, 380, 40, 180, 0.95],
];

/** Broad profile with a core and wings: two Gaussians of one centre. */
function broadProfile(fwhmKms: number, velocityKms: number, random: Random): LineRecipe['profile'] {
  const wing = random.uniform(0.15, 0.45);
  return [
    { weight: 1 - wing, velocityKms, sigmaKms: (0.88 * fwhmKms) / FWHM_PER_SIGMA },
    { weight: wing, velocityKms: velocityKms * 1.2, sigmaKms: (1.9 * fwhmKms) / FWHM_PER_SIGMA },
  ];
}

/**
 * A broad-line quasar: power law with iron bumps, broad ultraviolet and Balmer lines each at its own velocity, narrow [O III] and [O II].
 *
 * Equivalent widths as in the composite of Vanden Berk et al. (2001, AJ 122, 549), shifts after Shen et al. (2016, ApJ 831, 7), both
 * from memory and widened. Strengths are fluxes that follow from equivalent width times continuum.
 */
export function drawQuasar(random: Random, redshift: number): ObjectRecipe {
  const slope = random.normal(-1.5, 0.3);
  const width = random.logUniform(2000, 8500);
  const level = (wavelength: number) => Math.pow(wavelength / 5500, slope);
  const lines: LineRecipe[] = BROAD.map(([line, low, high, shift, scatter, relative]) => {
    const wavelengthRest = EMISSION_WAVELENGTHS[line];
    return {
      line,
      wavelengthRest,
      strength: random.logUniform(low, high) * level(wavelengthRest),
      broad: true,
      profile: broadProfile(width * relative * random.uniform(0.85, 1.2), random.normal(shift, scatter), random),
    };
  });
  const fwhmNarrow = random.logUniform(250, 900);
  const ratios = activeNucleusRatios(random);
  const oxygen = (random.logUniform(2, 50) * level(5008)) / (ratios['[O III] 5008'] ?? 1);
  for (const line of narrowLines(ratios, fwhmNarrow)) {
    if (line.wavelengthRest < 3300) continue;
    lines.push({ ...line, strength: line.strength * oxygen });
  }
  const strongest = lines.reduce((best, line) => (line.strength > best.strength ? line : best));
  return {
    redshift,
    lines,
    equivalentWidthRest: strongest.strength / level(strongest.wavelengthRest),
    anchor: strongest.line,
    dust: { law: 'cardelli-1989', colourExcess: 0 },
    continuum: continuum(random, 'quasar', {
      slope,
      oldFraction: random.uniform(0, 0.5),
      colourExcess: random.chance(0.2) ? random.exponential(0.08) : 0,
    }),
  };
}
