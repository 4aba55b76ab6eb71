import { describe, expect, it } from 'vitest';
import type { NightMeasurement } from '$lib/domain/night';
import { firstAgainst, medianNoiseFactor, noisePoints, signalPoints } from './signal-points';

const row = (more: Partial<NightMeasurement>) =>
  ({
    ...{ magnitude: null, exposureSeconds: 900, medianSignalToNoise: 3, noiseFactor: 1.1, confidence: 'secure' },
    ...more,
  }) as NightMeasurement;

describe('signalPoints', () => {
  it('leaves out rows that lack one of both', () => {
    const rows = [row({ magnitude: 21 }), row({}), row({ magnitude: 22, medianSignalToNoise: null })];
    expect(signalPoints(rows, 'magnitude')).toEqual([{ x: 21, y: 3, confidence: 'secure' }]);
    expect(signalPoints(rows, 'exposure')).toHaveLength(2);
  });

  it('goes by magnitude where a list has enough of the targets', () => {
    expect(firstAgainst([row({ magnitude: 21 }), row({})])).toBe('magnitude');
    expect(firstAgainst([row({ magnitude: 21 }), row({}), row({}), row({})])).toBe('exposure');
    expect(firstAgainst([])).toBe('exposure');
  });
});

describe('noise factors', () => {
  it('have a median, and points where both are known', () => {
    const rows = [
      row({ noiseFactor: 1 }),
      row({ noiseFactor: 1.3 }),
      row({ noiseFactor: 2 }),
      row({ noiseFactor: null }),
    ];
    expect(medianNoiseFactor(rows)).toBe(1.3);
    expect(noisePoints(rows)).toHaveLength(3);
    expect(medianNoiseFactor([])).toBeNull();
  });
});
