import { EXPECTED_LINES, type LineEntry } from '$lib/science/constants/lines';
import { lineLabel } from './layout/line-name';

/** What the fit at a redshift says of one line; NaN where it could not be measured. */
export interface FittedLine {
  line: string;
  wavelengthObserved: number;
  flux: number;
  fluxError: number;
  signalToNoise: number;
}

/** A line of the list where it is expected at a redshift, with what is measured there. */
export interface ExpectedLine extends FittedLine {
  /** As drawn: `Hα 6565`. */
  label: string;
  ionLabel: string;
  wavelengthRest: number;
  /** Drawn solid; forbidden and semi-forbidden lines are dashed. */
  permitted: boolean;
  photonEnergyEv: number;
  /** Principal quantum numbers, hydrogen only. */
  upperLevel: number | null;
  lowerLevel: number | null;
}

/** Signal-to-noise from which a line counts as seen: bold name, solid stroke. */
export const SEEN_SIGNAL_TO_NOISE = 3;

const entries = new Map<string, LineEntry>(EXPECTED_LINES.map((entry) => [entry.name, entry]));

/** Joins fitted lines to the line list, increasing wavelength. A name that the list does not have is left out. */
export function expectedLines(fitted: readonly FittedLine[]): ExpectedLine[] {
  return fitted
    .flatMap((line) => {
      const entry = entries.get(line.line);
      return entry ? [{ ...line, ...describe(entry) }] : [];
    })
    .sort((a, b) => a.wavelengthObserved - b.wavelengthObserved);
}

/** Lines of the list that fall outside [from, to] at this redshift, in ångström of the same frame. */
export function linesOutside(redshift: number, from: number, to: number): string[] {
  return EXPECTED_LINES.filter(({ wavelengthVacuum }) => {
    const observed = wavelengthVacuum * (1 + redshift);
    return observed < from || observed > to;
  }).map(({ name }) => lineLabel(name));
}

export function isSeen(line: { signalToNoise: number }): boolean {
  return line.signalToNoise >= SEEN_SIGNAL_TO_NOISE;
}

function describe(entry: LineEntry) {
  return {
    label: lineLabel(entry.name),
    ionLabel: lineLabel(entry.ion),
    wavelengthRest: entry.wavelengthVacuum,
    permitted: entry.kind === 'permitted',
    photonEnergyEv: entry.photonEnergyEv,
    upperLevel: entry.upperLevel ?? null,
    lowerLevel: entry.lowerLevel ?? null,
  };
}
