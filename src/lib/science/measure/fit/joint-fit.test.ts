import { describe, expect, it } from 'vitest';
import { GALAXY_LINES, testSpectrum } from '../test-spectrum';
import { workingSpectrum } from '../working-spectrum';
import { CORE_COMPONENTS } from './components';
import { fitErrors } from './fit-errors';
import { jointFit } from './joint-fit';
import { addLineProfile } from './line-profile';

describe('jointFit', () => {
  it('recovers redshift, width and fluxes without noise', () => {
    const spectrum = testSpectrum({ redshift: 0.2, lines: GALAXY_LINES, noise: 1e-3, sigmaKms: 90 });
    const working = workingSpectrum(spectrum);
    const fit = jointFit(working, CORE_COMPONENTS, { logScale: Math.log(1.2003), sigmaKms: [150, 1900] }, 20)!;
    expect(Math.abs(Math.expm1(fit.logScale) - 0.2)).toBeLessThan(2e-7);
    expect(fit.sigmaKms[0]).toBeCloseTo(90, 0);
    const index = CORE_COMPONENTS.findIndex((component) => component.name === 'H-alpha 6565');
    expect((fit.amplitude[index] * working.scale) / 100).toBeCloseTo(1, 3);
  });

  it('states errors that its own scatter bears out', () => {
    let squares = 0;
    const runs = 60;
    for (let seed = 1; seed <= runs; seed++) {
      const spectrum = testSpectrum({ redshift: 0.2, lines: GALAXY_LINES, seed, from: 5500, to: 8200, count: 900 });
      const working = workingSpectrum(spectrum);
      const fit = jointFit(working, CORE_COMPONENTS, { logScale: Math.log(1.2), sigmaKms: [100, 1900] }, 12)!;
      squares += ((fit.logScale - Math.log(1.2)) / fitErrors(fit).logScale) ** 2;
    }
    // 60 runs fix the standard deviation of the pull to 9 %; three of those either way.
    expect(Math.sqrt(squares / runs)).toBeGreaterThan(0.73);
    expect(Math.sqrt(squares / runs)).toBeLessThan(1.27);
  });

  it('returns null where no line is covered', () => {
    const working = workingSpectrum(testSpectrum({ from: 8000, to: 8100, count: 60 }));
    expect(jointFit(working, CORE_COMPONENTS, { logScale: Math.log(8), sigmaKms: [80, 1900] }, 3)).toBeNull();
  });
});

describe('addLineProfile', () => {
  it('has derivatives that finite differences confirm', () => {
    const { edges, wavelength, lsfSigma } = testSpectrum({ from: 5950, to: 6050, count: 60 });
    // A constant line-spread function: the analytic derivative leaves its slope out.
    lsfSigma.fill(1.4);
    const grid = { edges, wavelength, lsfSigma };
    const at = (shift: number, sigma: number) => {
      const rows = [new Float64Array(60), new Float64Array(60), new Float64Array(60)];
      addLineProfile(grid, 6000.3 * Math.exp(shift), sigma, 2, 0, 60, rows[0], rows[1], rows[2]);
      return rows;
    };
    const step = 1e-5;
    const [, byShift, byWidth] = at(0, 100);
    const up = at(step, 100)[0];
    const down = at(-step, 100)[0];
    const wide = at(0, 100 * Math.exp(1e-3))[0];
    const slim = at(0, 100 * Math.exp(-1e-3))[0];
    for (let i = 0; i < 60; i++) {
      expect((up[i] - down[i]) / (2 * step)).toBeCloseTo(byShift[i], 0);
      expect((wide[i] - slim[i]) / 2e-3).toBeCloseTo(byWidth[i], 3);
    }
  });

  it('holds its flux over the pixels', () => {
    const { edges, wavelength, lsfSigma } = testSpectrum({ from: 5900, to: 6100, count: 90 });
    const profile = new Float64Array(90);
    addLineProfile({ edges, wavelength, lsfSigma }, 6001.7, 60, 3, 0, 90, profile, null, null);
    let flux = 0;
    for (let i = 0; i < 90; i++) flux += profile[i] * (edges[i + 1] - edges[i]);
    expect(flux).toBeCloseTo(3, 4);
  });
});
