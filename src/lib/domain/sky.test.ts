import { describe, expect, it } from 'vitest';
import { coneBounds, separationDegrees, zoneOf } from './sky';

describe('separationDegrees', () => {
  // Meeus (1998), Astronomical Algorithms, example 17.a: Arcturus and Spica, 32.7930 degrees.
  it('gives the published separation of Arcturus and Spica', () => {
    expect(separationDegrees(213.9154, 19.1825, 201.2983, -11.1614)).toBeCloseTo(32.793, 4);
  });

  it('keeps its precision at a milliarcsecond', () => {
    expect(separationDegrees(10, 45, 10, 45 + 1 / 3.6e6) * 3.6e6).toBeCloseTo(1, 5);
  });
});

describe('coneBounds', () => {
  it('splits the range of right ascension where the cone crosses 0 h', () => {
    const { raRanges } = coneBounds(0.1, 0, 0.5);
    expect(raRanges).toHaveLength(2);
    expect(raRanges[1][0]).toBeCloseTo(359.6, 6);
  });

  it('takes the whole circle around a pole', () => {
    expect(coneBounds(20, 89.9, 0.2)).toEqual({ zones: [zoneOf(89.7), zoneOf(90)], raRanges: [[0, 360]] });
  });

  it('holds every position within the radius', () => {
    for (let i = 0; i < 500; i++) {
      const [ra, dec, radius] = [(i * 37.7) % 360, -85 + ((i * 13.1) % 170), 0.05 + (i % 40) / 10];
      const { zones, raRanges } = coneBounds(ra, dec, radius);
      for (let k = 0; k < 12; k++) {
        const d = dec + radius * 0.999 * Math.sin((k * Math.PI) / 6);
        let a = ra;
        // Walk east or west until the edge of the cone at this declination.
        const step = k % 2 ? 0.01 : -0.01;
        for (let n = 0; n < 400 && separationDegrees(ra, dec, a + step, d) < radius; n++) a += step;
        if (separationDegrees(ra, dec, a, d) > radius) continue;
        const wrapped = ((a % 360) + 360) % 360;
        expect(raRanges.some(([low, high]) => wrapped >= low && wrapped <= high)).toBe(true);
        expect(zoneOf(d)).toBeGreaterThanOrEqual(zones[0]);
        expect(zoneOf(d)).toBeLessThanOrEqual(zones[1]);
      }
    }
  });
});
