/** WGS 84 ellipsoid (NIMA TR8350.2, 2000): equatorial radius in metres and flattening. */
const EQUATORIAL_RADIUS_METRES = 6_378_137;
const FLATTENING = 1 / 298.257223563;

/**
 * Geocentric ITRS position in metres of a geodetic one (WGS 84).
 * Source: the closed form of the ellipsoid, e.g. Explanatory Supplement (2013), section 4.
 */
export function geodeticToItrs(
  latitudeDegrees: number,
  longitudeEastDegrees: number,
  heightMetres: number,
): [number, number, number] {
  const latitude = (latitudeDegrees * Math.PI) / 180;
  const longitude = (longitudeEastDegrees * Math.PI) / 180;
  const eccentricitySquared = FLATTENING * (2 - FLATTENING);
  const normal = EQUATORIAL_RADIUS_METRES / Math.sqrt(1 - eccentricitySquared * Math.sin(latitude) ** 2);
  const equatorial = (normal + heightMetres) * Math.cos(latitude);
  return [
    equatorial * Math.cos(longitude),
    equatorial * Math.sin(longitude),
    (normal * (1 - eccentricitySquared) + heightMetres) * Math.sin(latitude),
  ];
}

/**
 * Geodetic latitude and east longitude in degrees and height in metres (WGS 84) of a geocentric ITRS position in metres.
 * Source: Bowring (1976), Survey Review 23, 323, iterated; good to a micrometre for heights of observatories.
 *
 * @returns null for a position nearer to the Earth's centre than its surface is anywhere
 */
export function itrsToGeodetic([x, y, z]: readonly [number, number, number]): {
  latitudeDegrees: number;
  longitudeEastDegrees: number;
  heightMetres: number;
} | null {
  const equatorial = Math.hypot(x, y);
  if (!(Math.hypot(equatorial, z) > 6_300_000)) return null;
  const eccentricitySquared = FLATTENING * (2 - FLATTENING);
  const polarRadius = EQUATORIAL_RADIUS_METRES * (1 - FLATTENING);
  const secondEccentricitySquared = eccentricitySquared / (1 - eccentricitySquared);
  let reduced = Math.atan2(z, (1 - FLATTENING) * equatorial);
  let latitude = 0;
  for (let i = 0; i < 4; i++) {
    latitude = Math.atan2(
      z + secondEccentricitySquared * polarRadius * Math.sin(reduced) ** 3,
      equatorial - eccentricitySquared * EQUATORIAL_RADIUS_METRES * Math.cos(reduced) ** 3,
    );
    reduced = Math.atan2((1 - FLATTENING) * Math.sin(latitude), Math.cos(latitude));
  }
  const normal = EQUATORIAL_RADIUS_METRES / Math.sqrt(1 - eccentricitySquared * Math.sin(latitude) ** 2);
  // Along the ellipsoid's normal; holds at the poles as at the equator.
  const heightMetres =
    equatorial * Math.cos(latitude) +
    z * Math.sin(latitude) -
    normal * (1 - eccentricitySquared * Math.sin(latitude) ** 2);
  const degrees = 180 / Math.PI;
  return { latitudeDegrees: latitude * degrees, longitudeEastDegrees: Math.atan2(y, x) * degrees, heightMetres };
}
