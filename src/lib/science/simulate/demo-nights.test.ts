import { describe, expect, it } from 'vitest';
import { separationDegrees } from '$lib/domain/sky';
import { demoNight, demoTargets } from './demo-night';
import { earlierDemoNights } from './demo-nights';

describe('earlierDemoNights', { timeout: 60_000 }, () => {
  const nights = earlierDemoNights();
  const [first, second] = nights;

  it('repeats targets of the main night at their places', () => {
    const places = demoTargets();
    for (const { raDegrees, decDegrees } of nights.flatMap(({ spectra }) => spectra)) {
      const apart = places.map((place) => separationDegrees(raDegrees, decDegrees, place.raDegrees, place.decDegrees));
      expect(Math.min(...apart) * 3600).toBeLessThan(0.01);
    }
    expect(first.spectra).toHaveLength(17);
    expect(second.spectra).toHaveLength(14);
  });

  it('names every file once, and is the same each time', () => {
    for (const { spectra } of nights)
      expect(new Set(spectra.map(({ fileStem }) => fileStem)).size).toBe(spectra.length);
    expect(earlierDemoNights()[1].spectra[3].flux).toEqual(second.spectra[3].flux);
  });

  it('has a stack that is the mean of its singles, with a third of their variance', () => {
    const stack = second.spectra.at(-1)!;
    const singles = second.spectra.slice(-4, -1);
    const at = stack.flux.findIndex((_, i) => singles.every(({ error }) => error[i] > 0));
    expect(stack.flux[at]).toBeCloseTo(singles.reduce((sum, { flux }) => sum + flux[at], 0) / 3, 12);
    expect(stack.error[at] ** 2).toBeCloseTo(singles.reduce((sum, { error }) => sum + error[at] ** 2, 0) / 9, 12);
    expect(stack.header.XPOSURE).toBe(2700);
    expect(stack.header['DATE-END']).toBe(singles[2].header['DATE-END']);
  });

  it('keeps an object as bright as on the main night', () => {
    const main = demoNight();
    const mean = (values: Float64Array) => values.reduce((sum, value) => sum + value, 0) / values.length;
    const bright = second.spectra[0];
    const same = main.find(({ raDegrees }) => raDegrees === bright.raDegrees)!;
    const noise = mean(bright.error) / Math.sqrt(bright.flux.length);
    expect(Math.abs(mean(bright.flux) - mean(same.flux))).toBeLessThan(10 * noise + 0.1 * Math.abs(mean(same.flux)));
  });
});
