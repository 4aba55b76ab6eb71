/** Height of a declination zone: one arcminute. Cone searches look at a few whole zones and then at right ascension. */
const ZONES_PER_DEGREE = 60;
const DEGREE = Math.PI / 180;

/** Declination zone, counted from the south pole. */
export function zoneOf(decDegrees: number): number {
  return Math.floor((decDegrees + 90) * ZONES_PER_DEGREE);
}

/** Angle between two ICRS positions, degrees (Vincenty's formula on the sphere: exact at all separations). */
export function separationDegrees(ra1: number, dec1: number, ra2: number, dec2: number): number {
  const [a, d1, d2] = [(ra2 - ra1) * DEGREE, dec1 * DEGREE, dec2 * DEGREE];
  const east = Math.cos(d2) * Math.sin(a);
  const north = Math.cos(d1) * Math.sin(d2) - Math.sin(d1) * Math.cos(d2) * Math.cos(a);
  const along = Math.sin(d1) * Math.sin(d2) + Math.cos(d1) * Math.cos(d2) * Math.cos(a);
  return Math.atan2(Math.hypot(east, north), along) / DEGREE;
}

/**
 * Zones and right-ascension ranges that hold a cone: one range, two where it crosses 0 h, the whole circle at a pole.
 * All degrees.
 */
export function coneBounds(ra: number, dec: number, radius: number) {
  const zones: [number, number] = [zoneOf(Math.max(-90, dec - radius)), zoneOf(Math.min(90, dec + radius))];
  if (Math.abs(dec) + radius >= 90) return { zones, raRanges: [[0, 360]] as [number, number][] };
  // Largest half-width in right ascension of a circle on the sphere.
  const half = Math.asin(Math.min(1, Math.sin(radius * DEGREE) / Math.cos(dec * DEGREE))) / DEGREE;
  const [low, high] = [ra - half, ra + half];
  const raRanges: [number, number][] =
    half >= 180
      ? [[0, 360]]
      : low < 0
        ? [
            [0, high],
            [low + 360, 360],
          ]
        : high > 360
          ? [
              [low, 360],
              [0, high - 360],
            ]
          : [[low, high]];
  return { zones, raRanges };
}
