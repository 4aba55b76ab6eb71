import { EMISSION_WAVELENGTHS, type EmissionName } from './emission-lines';
import { drawLymanAlpha } from './draw-lyman-alpha';
import { drawStarForming } from './draw-object';
import type { Random } from './random';
import type { Recipe } from './recipe';

/** Identities a lone line can have, and the rest-frame range around it that holds no other strong line, ångström. */
const IDENTITIES: readonly {
  line: EmissionName;
  from: [number, number];
  to: [number, number];
  redshift: [number, number];
}[] = [
  { line: 'H-alpha 6565', from: [5120, 6250], to: [6600, 6690], redshift: [0.01, 0.5] },
  { line: '[O II] 3730', from: [2900, 3650], to: [3790, 4300], redshift: [0.2, 1.6] },
  { line: '[O III] 5008', from: [4890, 4930], to: [5040, 5800], redshift: [0.05, 0.95] },
  { line: 'Lyman-alpha 1216', from: [1000, 1180], to: [1240, 1540], redshift: [2.2, 6.8] },
];

/**
 * Fills a recipe so that its spectrum shows one line only: the range ends before the next strong line would come in, or the line is
 * the only bright one at that redshift. [O III] brings its weaker partner along, kept below a signal-to-noise ratio of 4.
 */
export function drawSingleLine(recipe: Recipe, random: Random): void {
  const identity = random.choice(IDENTITIES);
  const { line, from, to } = identity;
  const redshift = random.uniform(...identity.redshift);
  const start = random.uniform(...from) * (1 + redshift);
  const end = random.uniform(...to) * (1 + redshift);
  recipe.arms = [
    {
      start: Math.max(3300, start),
      end,
      axis: random.chance(0.3) ? 'log' : 'linear',
      resolvingPower: random.logUniform(700, 5000),
      constantFwhm: random.chance(0.5),
      pixelsPerFwhm: random.uniform(2, 4),
    },
  ];
  recipe.signalToNoise = line === '[O III] 5008' ? random.uniform(8, 11) : random.logUniform(8, 40);
  const object =
    line === 'Lyman-alpha 1216' ? drawLymanAlpha(random, redshift, false) : drawStarForming(random, redshift);
  // satellites that would tell the identity by themselves are left out or weak: a low-metallicity, single-line case
  const wavelength = EMISSION_WAVELENGTHS[line];
  for (const other of object.lines) {
    const partner = other.line.startsWith(line.slice(0, line.lastIndexOf(' ')));
    if (!partner && Math.abs(other.wavelengthRest - wavelength) > 1) other.strength *= 0.5;
  }
  recipe.objects.push(object);
}
