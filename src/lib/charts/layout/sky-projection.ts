interface Position {
  raDegrees: number;
  decDegrees: number;
}

/** A small piece of sky laid flat: offsets from its centre in degrees of arc, east to the left. */
export interface SkyProjection {
  centre: Position;
  /** Half the extent in degrees of arc, with a margin. */
  halfWidth: number;
  halfHeight: number;
  /** Degrees of arc west (to the right) and north of the centre. */
  place: (position: Position) => { west: number; north: number };
}

/** Smallest half extent, degrees of arc, so that a single target still has a map around it. */
const LEAST_HALF = 0.05;

/**
 * Lays positions flat about their middle: right ascension times cos(declination of the centre), which keeps the true
 * aspect of a field of some degrees. The middle in right ascension is a mean of directions, so that a field across 0 h
 * stays in one piece. Null without a position.
 */
export function skyProjection(positions: readonly Position[]): SkyProjection | null {
  if (positions.length === 0) return null;
  const radian = Math.PI / 180;
  const [x, y] = positions.reduce(
    ([sumX, sumY], { raDegrees }) => [sumX + Math.cos(raDegrees * radian), sumY + Math.sin(raDegrees * radian)],
    [0, 0],
  );
  const mean = Math.atan2(y, x) / radian;
  const east = positions.map(({ raDegrees }) => wrap(raDegrees - mean));
  const raMiddle = mean + (Math.min(...east) + Math.max(...east)) / 2;
  const declinations = positions.map(({ decDegrees }) => decDegrees);
  const decMiddle = (Math.min(...declinations) + Math.max(...declinations)) / 2;
  const squeeze = Math.cos(decMiddle * radian);
  const place = ({ raDegrees, decDegrees }: Position) => ({
    west: -wrap(raDegrees - raMiddle) * squeeze,
    north: decDegrees - decMiddle,
  });
  const places = positions.map(place);
  const most = (values: number[]) => Math.max(LEAST_HALF, ...values.map(Math.abs)) * 1.06;
  return {
    centre: { raDegrees: ((raMiddle % 360) + 360) % 360, decDegrees: decMiddle },
    halfWidth: most(places.map(({ west }) => west)),
    halfHeight: most(places.map(({ north }) => north)),
    place,
  };
}

/** An angle to the range from -180 to under 180 degrees. */
function wrap(degrees: number): number {
  return ((((degrees + 180) % 360) + 360) % 360) - 180;
}
