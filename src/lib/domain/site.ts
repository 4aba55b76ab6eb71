/** Where a telescope stands: geodetic, degrees and metres, longitude to the east. */
export interface Site {
  latitudeDegrees: number;
  longitudeEastDegrees: number;
  heightMetres: number;
}
