import { describe, expect, it } from 'vitest';
import { MASK } from '$lib/domain/spectrum';
import { removeCosmicRays } from './cosmic-rays';
import { testSpectrum } from './test-spectrum';
import { workingSpectrum } from './working-spectrum';

describe('removeCosmicRays', () => {
  it('takes out spikes of one and two pixels and leaves lines alone', () => {
    const spectrum = testSpectrum({
      redshift: 0,
      lines: { 'H-alpha 6565': 120 },
      continuum: 0,
      sigmaKms: 20,
      resolvingPower: 1200,
    });
    spectrum.flux[500] += 40;
    spectrum.flux[900] += 30;
    spectrum.flux[901] += 30;
    const working = workingSpectrum(spectrum);
    const removed = removeCosmicRays(working, working.flux);
    expect(removed).toBe(3);
    for (const pixel of [500, 900, 901]) expect(working.mask[pixel] & MASK.cosmicRay).toBeTruthy();
    expect(working.weight[Math.floor((6564.61 - 4000) / 2)]).toBeGreaterThan(0);
  });
});
