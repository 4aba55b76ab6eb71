// Source: astropy 5.2.1 (Debian's python3-astropy, whose geodesy is ERFA's gc2gd), taken 2026-12-01 by
//   EarthLocation.from_geocentric(x, y, z, unit='m').to_geodetic('WGS84')
import { describe, expect, it } from 'vitest';
import { geodeticToItrs, itrsToGeodetic } from '$lib/domain/geodetic-position';

const PLACES: [itrs: [number, number, number], latitude: number, longitude: number, height: number][] = [
  [[-4090053.34, 2496579.22, -4196270.98], -41.39999999024791, 148.60000001422532, 639.9983682557092],
  [[1794234.4, -5155236.2, -3292752.1], -31.2699997386795, -70.80999974818423, 2380.0171637575017],
  [[-5464487.0, -2493000.7, 2151012.1], 19.826151904718444, -155.4766454492538, 4157.723067128894],
  [[3909167.0, -14.0, 5022000.0], 52.288915844374486, -0.00020519484411352096, -671.8286871627556],
  [[10.0, -20.0, 6359567.0], 89.99979989208501, -63.434948822922024, 2814.685793867935],
];

describe('geodetic positions of OBSGEO-X, -Y, -Z', () => {
  it.each(PLACES)(
    'are those of a general library at %o, to a tenth of a millimetre',
    (itrs, latitude, longitude, height) => {
      const found = itrsToGeodetic(itrs)!;
      // 1e-9 degrees are 0.1 mm on the ground.
      expect(Math.abs(found.latitudeDegrees - latitude)).toBeLessThan(1e-9);
      expect(Math.abs(found.longitudeEastDegrees - longitude)).toBeLessThan(1e-9);
      expect(Math.abs(found.heightMetres - height)).toBeLessThan(1e-4);
      geodeticToItrs(latitude, longitude, height).forEach((value, i) => expect(value).toBeCloseTo(itrs[i], 4));
    },
  );
});
