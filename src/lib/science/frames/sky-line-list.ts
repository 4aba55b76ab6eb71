/** A line of the night sky that serves as a check of the wavelength scale. */
export interface SkyLine {
  name: string;
  airAngstrom: number;
  /** Distance to the nearest other sky line of note, ångström: nearer ones would pull a fit at low resolution. */
  isolationAngstrom: number;
}

/**
 * Strong, nearly single lines of the night sky, air wavelengths.
 * Source: Osterbrock et al. (1996, PASP 108, 277; 1997, PASP 109, 614), as quoted in public wavelength calibration
 * lists; neighbours from the same lists.
 */
export const SKY_LINES: readonly SkyLine[] = [
  { name: '[O I] 5577', airAngstrom: 5577.338, isolationAngstrom: 40 },
  { name: '[O I] 6300', airAngstrom: 6300.304, isolationAngstrom: 12 },
  { name: 'OH 6864', airAngstrom: 6863.955, isolationAngstrom: 7 },
  { name: 'OH 6923', airAngstrom: 6923.22, isolationAngstrom: 10.6 },
  { name: 'OH 7276', airAngstrom: 7276.405, isolationAngstrom: 8 },
  { name: 'OH 7316', airAngstrom: 7316.282, isolationAngstrom: 12.5 },
  { name: 'OH 7341', airAngstrom: 7340.885, isolationAngstrom: 11.7 },
  { name: 'OH 7751', airAngstrom: 7750.64, isolationAngstrom: 9.4 },
  { name: 'OH 7794', airAngstrom: 7794.112, isolationAngstrom: 13.7 },
  { name: 'OH 7822', airAngstrom: 7821.503, isolationAngstrom: 13 },
  { name: 'OH 7965', airAngstrom: 7964.65, isolationAngstrom: 15.4 },
  { name: 'OH 7993', airAngstrom: 7993.332, isolationAngstrom: 20.7 },
  { name: 'OH 8399', airAngstrom: 8399.17, isolationAngstrom: 16 },
  { name: 'OH 8430', airAngstrom: 8430.174, isolationAngstrom: 14.9 },
  { name: 'OH 8827', airAngstrom: 8827.096, isolationAngstrom: 8.9 },
  { name: 'OH 8886', airAngstrom: 8885.85, isolationAngstrom: 17.3 },
  { name: 'OH 8920', airAngstrom: 8919.635, isolationAngstrom: 16.5 },
  { name: 'OH 9376', airAngstrom: 9375.961, isolationAngstrom: 20 },
  { name: 'OH 9440', airAngstrom: 9439.65, isolationAngstrom: 18.9 },
  { name: 'OH 9872', airAngstrom: 9872.137, isolationAngstrom: 40 },
];
