import { describe, expect, it } from 'vitest';
import { geodeticToItrs, itrsToGeodetic } from './geodetic-position';

describe('itrsToGeodetic', () => {
  it.each([
    [-31.27, -70.81, 2380],
    [19.8, -155.5, 4200],
    [90, 0, 100],
    [-90, 0, 2800],
    [0, 180, 0],
  ])('undoes geodeticToItrs at %d, %d, %d m', (latitude, longitude, height) => {
    const back = itrsToGeodetic(geodeticToItrs(latitude, longitude, height))!;
    expect(back.latitudeDegrees).toBeCloseTo(latitude, 9);
    if (Math.abs(latitude) < 90) expect(back.longitudeEastDegrees).toBeCloseTo(longitude, 9);
    expect(back.heightMetres).toBeCloseTo(height, 5);
  });

  it('gives nothing for a place inside the Earth', () => {
    expect(itrsToGeodetic([0, 0, 0])).toBeNull();
    expect(itrsToGeodetic([1, 2, 3])).toBeNull();
  });
});
