import { EMISSION_WAVELENGTHS, type Strengths } from './emission-lines';
import { continuum, narrowLines } from './draw-object';
import type { Random } from './random';
import type { LineRecipe, ObjectRecipe } from './recipe';

/** Exponentially falling red tail after a sharp rise, written as a chain of Gaussians whose weights fall. */
function tailProfile(peakKms: number, riseKms: number, tailKms: number): LineRecipe['profile'] {
  const parts = 14;
  const spacing = Math.max(riseKms * 0.8, (tailKms * 4) / parts);
  const profile: LineRecipe['profile'] = [];
  for (let i = 0; i < parts; i++) {
    const beyond = i * spacing;
    // the chain's Gaussians widen with the spacing only where they overlap smoothly
    profile.push({
      weight: Math.exp(-beyond / tailKms),
      velocityKms: peakKms + beyond,
      sigmaKms: i === 0 ? riseKms : Math.max(riseKms, spacing * 0.75),
    });
  }
  const sum = profile.reduce((total, part) => total + part.weight, 0);
  return profile.map((part) => ({ ...part, weight: part.weight / sum }));
}

/** A Gaussian cut on its blue side by an error-function edge, as intergalactic gas near the systemic velocity does. */
function cutProfile(peakKms: number, sigmaKms: number, edgeKms: number): LineRecipe['profile'] {
  const profile: LineRecipe['profile'] = [];
  const part = Math.max(12, sigmaKms / 8);
  for (let v = -3 * sigmaKms; v <= 3.5 * sigmaKms; v += part) {
    const cut = 1 / (1 + Math.exp(-(v + 0.3 * sigmaKms) / edgeKms));
    profile.push({
      weight: Math.exp(-0.5 * (v / sigmaKms) ** 2) * cut,
      velocityKms: peakKms + v,
      sigmaKms: part * 0.85,
    });
  }
  const sum = profile.reduce((total, p) => total + p.weight, 0);
  return profile.map((p) => ({ ...p, weight: p.weight / sum }));
}

/**
 * A Lyman-alpha emitter: asymmetric line whose red peak lies at 0.9 FWHM - 34 km/s from the systemic redshift with a scatter of 80 km/s
 * (Verhamme et al. 2018, MNRAS 478, L60, eq. 2, from memory; the scatter is ours), in a quarter of the cases with a blue bump; blue
 * continuum that breaks off across the line. Some show C IV, He II and C III] faintly.
 */
export function drawLymanAlpha(random: Random, redshift: number, withOthers: boolean): ObjectRecipe {
  const fwhm = random.uniform(150, 480);
  const peakKms = Math.max(20, 0.9 * fwhm - 34 + random.normal(0, 80));
  let profile = random.chance(0.5)
    ? tailProfile(peakKms, fwhm * random.uniform(0.2, 0.27), fwhm * random.uniform(0.4, 0.65))
    : cutProfile(peakKms, fwhm * random.uniform(0.5, 0.6), fwhm * random.uniform(0.05, 0.15));
  if (random.chance(0.25)) {
    const share = random.uniform(0.08, 0.3);
    profile = [
      ...profile.map((p) => ({ ...p, weight: p.weight * (1 - share) })),
      { weight: share, velocityKms: -peakKms * random.uniform(0.6, 1.3), sigmaKms: fwhm * 0.3 },
    ];
  }
  const others: Strengths = withOthers
    ? {
        'C IV 1548': random.uniform(0.05, 0.25),
        'C IV 1551': random.uniform(0.03, 0.15),
        'He II 1640': random.uniform(0.03, 0.2),
        'O III] 1666': random.uniform(0.02, 0.1),
        '[C III] 1907': random.uniform(0.05, 0.2),
        'C III] 1909': random.uniform(0.03, 0.14),
      }
    : { '[C III] 1907': random.uniform(0, 0.04), 'C III] 1909': random.uniform(0, 0.03) };
  const main: LineRecipe = {
    line: 'Lyman-alpha 1216',
    wavelengthRest: EMISSION_WAVELENGTHS['Lyman-alpha 1216'],
    strength: 1,
    broad: false,
    profile,
  };
  return {
    redshift,
    lines: [main, ...narrowLines(others, random.uniform(60, 200))],
    equivalentWidthRest: random.logUniform(20, 250),
    anchor: main.line,
    dust: { law: 'calzetti-2000', colourExcess: 0 },
    continuum: continuum(random, 'ultraviolet', { slope: random.uniform(-2.5, -1.4) }),
  };
}
