import { describe, expect, it } from 'vitest';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { layOutPixels } from './detector-grid';
import { redshiftInformationBound } from './information-bound';
import { lineOnPixels, profileShape } from './line-on-pixels';
import { lineSignalToNoise } from './line-signal';
import type { LineRecipe } from './recipe';

const grid = layOutPixels(
  [{ start: 6000, end: 7000, axis: 'linear', resolvingPower: 2000, constantFwhm: true, pixelsPerFwhm: 8 }],
  1,
  1,
);
const line = (sigmaKms: number): LineRecipe => ({
  line: 'test',
  wavelengthRest: 5000,
  strength: 1,
  broad: false,
  profile: [{ weight: 1, velocityKms: 0, sigmaKms }],
});

describe('lineOnPixels', () => {
  it('keeps the flux, the mean and the summed variance of line, instrument and pixel', () => {
    const profile = lineOnPixels(line(150), 0.3, grid)!;
    let flux = 0;
    let mean = 0;
    let square = 0;
    profile.value.forEach((value, k) => {
      const i = profile.first + k;
      const width = grid.upper[i] - grid.lower[i];
      flux += value * width;
      mean += value * width * grid.centre[i];
      square += value * width * (grid.centre[i] - 6500) ** 2;
    });
    const width = grid.upper[0] - grid.lower[0];
    const intrinsic = (6500 * 150) / SPEED_OF_LIGHT_KMS;
    const lsf = 6500 / 2000 / 2.354820045;
    expect(flux).toBeCloseTo(1, 6);
    expect(mean).toBeCloseTo(6500, 4);
    expect(square).toBeCloseTo(intrinsic ** 2 + lsf ** 2 + width ** 2 / 12, 2);
  });

  it('has the derivatives that differences give', () => {
    const step = 1e-6;
    const at = lineOnPixels(line(150), 0.3, grid)!;
    const up = lineOnPixels(line(150), 1.3 * Math.exp(step) - 1, grid)!;
    const wide = lineOnPixels(line(150 * (1 + 1e-4)), 0.3, grid)!;
    const peak = Math.max(...at.byShift.map(Math.abs));
    const peakWidth = Math.max(...at.byWidth.map(Math.abs));
    for (let k = 2; k < at.value.length - 2; k++) {
      const shifted = up.value[k + at.first - up.first];
      expect(Math.abs((shifted - at.value[k]) / step - at.byShift[k])).toBeLessThan(0.02 * peak);
      const widened = wide.value[k + at.first - wide.first];
      expect(Math.abs((widened - at.value[k]) / 1e-4 - at.byWidth[k])).toBeLessThan(0.03 * peakWidth);
    }
  });

  it('is absent beyond the detector and partly covered at its end', () => {
    expect(lineOnPixels(line(100), 1, grid)).toBeNull();
    expect(lineOnPixels(line(100), 0.4, grid)!.coverage).toBeCloseTo(0.5, 2);
  });
});

describe('profileShape', () => {
  it('finds width and peak of a Gaussian', () => {
    const { fwhmKms, peakKms } = profileShape(line(100));
    expect(fwhmKms).toBeCloseTo(235.48, 0);
    expect(Math.abs(peakKms)).toBeLessThan(1);
  });
});

describe('redshiftInformationBound', () => {
  it('is sqrt(2) sigma / S for one finely sampled line', () => {
    const variance = new Float64Array(grid.centre.length).fill(0.01);
    const profile = lineOnPixels(line(150), 0.3, grid)!;
    const signal = lineSignalToNoise(profile, 5, variance);
    const sigma = Math.hypot((6500 * 150) / SPEED_OF_LIGHT_KMS, 6500 / 2000 / 2.354820045) / 6500;
    const bound = redshiftInformationBound([{ profile, flux: 5, group: 'a' }], grid, variance);
    expect(bound / ((Math.SQRT2 * sigma) / signal)).toBeGreaterThan(1);
    expect(bound / ((Math.SQRT2 * sigma) / signal)).toBeLessThan(1.05);
  });

  it('is NaN without lines', () => {
    expect(redshiftInformationBound([], grid, new Float64Array(grid.centre.length).fill(1))).toBeNaN();
  });
});
