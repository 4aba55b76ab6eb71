import { describe, expect, it } from 'vitest';
import { skyProjection } from './sky-projection';

const at = (raDegrees: number, decDegrees: number) => ({ raDegrees, decDegrees });

describe('skyProjection', () => {
  it('lets right ascension grow to the left', () => {
    const map = skyProjection([at(62, -31), at(64, -31)]);
    expect(map?.place(at(64, -31)).west).toBeLessThan(0);
    expect(map?.place(at(62, -31)).west).toBeGreaterThan(0);
  });
  it('squeezes right ascension by the cosine of the declination: at 60 degrees, 2 degrees are 1 degree of arc', () => {
    const map = skyProjection([at(10, 60), at(12, 60)]);
    expect((map?.place(at(10, 60)).west ?? 0) - (map?.place(at(12, 60)).west ?? 0)).toBeCloseTo(1, 10);
  });
  it('keeps a field across 0 h in one piece', () => {
    const map = skyProjection([at(359.5, 0), at(0.5, 0)]);
    expect(map?.halfWidth).toBeCloseTo(0.53, 2);
    expect(Math.min(map?.centre.raDegrees ?? 99, 360 - (map?.centre.raDegrees ?? 99))).toBeCloseTo(0, 6);
  });
  it('gives a single target a map around it, and no target none', () => {
    expect(skyProjection([at(10, 10)])?.halfHeight).toBeGreaterThan(0);
    expect(skyProjection([])).toBeNull();
  });
});
