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
