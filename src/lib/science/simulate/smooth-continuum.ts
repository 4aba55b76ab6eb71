import { dustTransmission } from '$lib/science/constants/extinction';
import type { ContinuumRecipe } from './recipe';

/** Planck's law in f_lambda, up to a constant: 1.4388e8 Å K is hc/k (CODATA 2018). */
function blackBody(wavelength: number, temperature: number): number {
  return Math.pow(wavelength / 5500, -5) / (Math.exp(1.4387769e8 / (wavelength * temperature)) - 1);
}

function relativeBlackBody(wavelength: number, temperature: number): number {
  return blackBody(wavelength, temperature) / blackBody(5500, temperature);
}

/** Step of the given ratio at a wavelength: 1 on the red side, 1/ratio on the blue. */
function step(wavelength: number, at: number, width: number, ratio: number): number {
  const share = 1 / (1 + Math.exp(-(wavelength - at) / width));
  return 1 / ratio + (1 - 1 / ratio) * share;
}

function bump(wavelength: number, at: number, sigma: number): number {
  return Math.exp(-0.5 * ((wavelength - at) / sigma) ** 2);
}

/** Fe II and Balmer continuum bumps of quasars (positions from memory of Vestergaard & Wilkes 2001 and Boroson & Green 1992). */
function ironBumps(wavelength: number): number {
  return (
    0.1 * bump(wavelength, 2250, 90) +
    0.22 * bump(wavelength, 2490, 130) +
    0.16 * bump(wavelength, 2960, 200) +
    0.15 * bump(wavelength, 3400, 250) +
    0.13 * bump(wavelength, 4570, 90) +
    0.14 * bump(wavelength, 5270, 120)
  );
}

/**
 * Continuum without absorption features at a rest wavelength, relative to its value near 5500 Å (1500 Å for ultraviolet kinds);
 * what equivalent widths are counted against.
 */
export function smoothContinuum(recipe: ContinuumRecipe, wavelength: number): number {
  const dust = recipe.colourExcess > 0 ? dustTransmission(wavelength, recipe.colourExcess, 'calzetti-2000') : 1;
  switch (recipe.kind) {
    case 'none':
      return 0;
    case 'young':
    case 'old': {
      const young = Math.pow(wavelength / 5500, recipe.slope);
      const old =
        relativeBlackBody(wavelength, recipe.temperatureKelvin) *
        step(wavelength, 4000, 45, recipe.breakRatio) *
        step(wavelength, 2640, 80, 1.6);
      const balmerJump = step(wavelength, 3680, 60, 1 + 0.06 * recipe.balmerAbsorptionAngstrom);
      return dust * ((1 - recipe.oldFraction) * young * balmerJump + recipe.oldFraction * old);
    }
    case 'quasar':
      return (
        dust * (Math.pow(wavelength / 5500, recipe.slope) * (1 + ironBumps(wavelength)) + 0.12 * recipe.oldFraction)
      );
    case 'ultraviolet':
      return dust * Math.pow(wavelength / 1500, recipe.slope);
    case 'featureless': {
      const x = Math.log(wavelength / 5500);
      const phase = recipe.detailSeed % 7;
      return (
        Math.pow(wavelength / 5500, recipe.slope) *
        (1 + 0.08 * Math.sin(5 * x + phase) + 0.04 * Math.sin(11 * x - phase))
      );
    }
    case 'star': {
      const jump =
        recipe.star === 'A' || recipe.star === 'F' ? step(wavelength, 3690, 40, recipe.star === 'A' ? 1.8 : 1.25) : 1;
      const blueLoss =
        recipe.star === 'G' || recipe.star === 'K' ? step(wavelength, 4000, 60, recipe.star === 'K' ? 1.8 : 1.35) : 1;
      return dust * relativeBlackBody(wavelength, recipe.temperatureKelvin) * jump * blueLoss;
    }
  }
}
