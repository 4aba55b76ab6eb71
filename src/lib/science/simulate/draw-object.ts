import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { EMISSION_WAVELENGTHS, type EmissionName, type Strengths } from './emission-lines';
import { activeNucleusRatios, shockRatios, starFormingRatios } from './line-ratios';
import type { Random } from './random';
import { STAR_KINDS, type ContinuumRecipe, type LineRecipe, type ObjectRecipe } from './recipe';
import { STARS } from './stellar-features';

/** Lines of one width and velocity from their strengths. */
export function narrowLines(strengths: Strengths, fwhmKms: number, velocityKms = 0): LineRecipe[] {
  return (Object.entries(strengths) as [EmissionName, number][])
    .filter(([, strength]) => strength > 0)
    .map(([line, strength]) => ({
      line,
      wavelengthRest: EMISSION_WAVELENGTHS[line],
      strength,
      broad: false,
      profile: [{ weight: 1, velocityKms, sigmaKms: fwhmKms / FWHM_PER_SIGMA }],
    }));
}

/** Name of the strongest line redward of a rest wavelength. */
export function strongestLine(lines: readonly LineRecipe[], fromAngstrom = 3000): string | null {
  let best: LineRecipe | null = null;
  for (const line of lines)
    if (line.wavelengthRest > fromAngstrom && line.strength > (best?.strength ?? 0)) best = line;
  return best?.line ?? null;
}

export function continuum(
  random: Random,
  kind: ContinuumRecipe['kind'],
  more: Partial<ContinuumRecipe> = {},
): ContinuumRecipe {
  return {
    kind,
    slope: -1.5,
    temperatureKelvin: random.uniform(4200, 5200),
    oldFraction: 0,
    breakRatio: random.uniform(1.3, 2.1),
    dispersionKms: random.uniform(80, 320),
    balmerAbsorptionAngstrom: 0,
    metalStrength: random.uniform(0.7, 1.2),
    star: null,
    colourExcess: 0,
    detailSeed: random.integer(1, 1e9),
    ...more,
  };
}

function drawDust(random: Random, meanColourExcess: number): ObjectRecipe['dust'] {
  return {
    law: random.choice(['cardelli-1989', 'odonnell-1994', 'calzetti-2000'] as const),
    colourExcess: Math.min(1, random.exponential(meanColourExcess)),
  };
}

/** A star-forming galaxy: metallicity, width, dust, mixture of young and old starlight. */
export function drawStarForming(random: Random, redshift: number): ObjectRecipe {
  const metallicity = random.uniform(-1, 0.3);
  const lines = narrowLines(starFormingRatios(metallicity, random), random.logUniform(45, 420));
  return {
    redshift,
    lines,
    equivalentWidthRest: random.logUniform(8, 400),
    anchor: strongestLine(lines),
    dust: drawDust(random, 0.17),
    continuum: continuum(random, 'young', {
      slope: random.uniform(-2.3, -0.6),
      oldFraction: random.uniform(0, 0.75),
      balmerAbsorptionAngstrom: random.uniform(0, 5),
      colourExcess: random.exponential(0.1),
    }),
  };
}

/** Narrow-line active nucleus, or shock-like gas, in an old host. */
export function drawActiveNucleus(random: Random, redshift: number, shock: boolean): ObjectRecipe {
  const lines = narrowLines(shock ? shockRatios(random) : activeNucleusRatios(random), random.logUniform(180, 850));
  if (!shock && random.chance(0.4)) {
    // outflows show as a blue wing under [O III]
    const share = random.uniform(0.1, 0.4);
    const velocityKms = -random.uniform(100, 500);
    const sigmaKms = random.uniform(250, 600);
    for (const line of lines) {
      if (!line.line.startsWith('[O III]')) continue;
      line.profile = [
        { ...line.profile[0], weight: 1 - share },
        { weight: share, velocityKms, sigmaKms },
      ];
    }
  }
  return {
    redshift,
    lines,
    equivalentWidthRest: random.logUniform(5, 150),
    anchor: strongestLine(lines),
    dust: drawDust(random, 0.2),
    continuum: continuum(random, 'old', {
      slope: random.uniform(-1.8, -0.5),
      oldFraction: random.uniform(0.5, 1),
      balmerAbsorptionAngstrom: random.uniform(0.5, 2.5),
    }),
  };
}

/** A galaxy without emission: old starlight with Ca H and K, G band, Mg b, Na D and the 4000 Å break. */
export function drawPassive(random: Random, redshift: number): ObjectRecipe {
  return {
    redshift,
    lines: [],
    equivalentWidthRest: 0,
    anchor: null,
    dust: { law: 'cardelli-1989', colourExcess: 0 },
    continuum: continuum(random, 'old', {
      slope: -1,
      oldFraction: random.uniform(0.9, 1),
      breakRatio: random.uniform(1.6, 2.2),
      balmerAbsorptionAngstrom: random.uniform(1, 2.2),
    }),
  };
}

/** A star of some kind at rest but for its own motion; cool ones may show hydrogen emission. */
export function drawStar(random: Random): ObjectRecipe {
  const star = random.choice(STAR_KINDS);
  const [low, high] = STARS[star].temperature;
  const redshift = random.normal(0, 60) / SPEED_OF_LIGHT_KMS;
  const emission: Strengths = { 'H-alpha 6565': 1, 'H-beta 4863': 0.35, 'H-gamma 4342': 0.17, 'H-delta 4103': 0.1 };
  return {
    redshift,
    lines: star === 'M emission' ? narrowLines(emission, random.uniform(40, 90)) : [],
    equivalentWidthRest: star === 'M emission' ? random.logUniform(1.5, 8) : 0,
    anchor: star === 'M emission' ? 'H-alpha 6565' : null,
    dust: { law: 'cardelli-1989', colourExcess: 0 },
    continuum: continuum(random, 'star', {
      star,
      temperatureKelvin: random.uniform(low, high),
      dispersionKms: random.uniform(10, 60),
      colourExcess: random.exponential(0.04),
    }),
  };
}

/** A continuum that tells nothing: a power law with slow wiggles. */
export function drawFeatureless(random: Random): ObjectRecipe {
  return {
    redshift: 0,
    lines: [],
    equivalentWidthRest: 0,
    anchor: null,
    dust: { law: 'cardelli-1989', colourExcess: 0 },
    continuum: continuum(random, 'featureless', { slope: random.uniform(-2.5, 1.5) }),
  };
}
