import { describe, expect, it } from 'vitest';
import type { Spectrum } from '$lib/domain/spectrum';
import { measureSpectrum } from './measure-spectrum';
import { GALAXY_LINES, testSpectrum } from './test-spectrum';

const options = { redshift: 0.2213, lines: GALAXY_LINES, seed: 21 };
const reference = measureSpectrum(testSpectrum(options));

const agrees = (spectrum: Spectrum, redshift: number = reference.redshift!) => {
  const measurement = measureSpectrum(spectrum);
  const error = Math.hypot(measurement.redshiftError!, reference.redshiftError!);
  expect(Math.abs(measurement.redshift! - redshift)).toBeLessThan(3 * error);
  return measurement;
};

describe('the same object seen otherwise has the same redshift within its error', () => {
  it('with the pixels shifted by a third of a pixel', () => {
    agrees(testSpectrum({ ...options, from: 4000.67, to: 9000.67 }));
  });

  it('with other pixels and other noise', () => {
    agrees(testSpectrum({ ...options, count: 3600, seed: 22 }));
  });

  it('with flux, noise and unit scaled together by 1e17', () => {
    const scaled = agrees(testSpectrum({ ...options, scale: 1e17 }));
    expect(scaled.confidence).toBe(reference.confidence);
    expect(scaled.redshift).toBeCloseTo(reference.redshift!, 9);
  });

  it('with the whole wavelength axis stretched, as a velocity would', () => {
    const stretched = testSpectrum(options);
    const stretch = 1.0005;
    for (const array of [stretched.wavelength, stretched.edges, stretched.lsfSigma]) {
      array.forEach((value, i) => (array[i] = value * stretch));
    }
    agrees(stretched, (1 + reference.redshift!) * stretch - 1);
  });

  it('with a gap and masked pixels away from its lines', () => {
    const masked = testSpectrum(options);
    masked.variance.fill(Infinity, 700, 800);
    agrees(masked);
  });
});

describe('a spectrum turned upside down', () => {
  it('claims no emission-line redshift', () => {
    const inverted = testSpectrum(options);
    inverted.flux.forEach((value, i) => (inverted.flux[i] = 10 - value));
    const measurement = measureSpectrum(inverted);
    const claimed = ['secure', 'probable'].includes(measurement.confidence);
    expect(claimed && measurement.candidates[0].objectClass !== 'absorption only').toBe(false);
  });
});

describe('errors', () => {
  it('of an unusable variance are estimated from the spectrum itself', () => {
    const unknown = testSpectrum({ ...options, noise: 1 });
    unknown.varianceKnown = false;
    unknown.variance.fill(1);
    const measurement = agrees(unknown);
    expect(measurement.redshiftError! / reference.redshiftError!).toBeGreaterThan(0.7);
    expect(measurement.redshiftError! / reference.redshiftError!).toBeLessThan(1.4);
  });
});
