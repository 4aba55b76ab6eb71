import { HC_EV_ANGSTROM } from './physical';

/** How a line is made; `absorption` lines are stellar or interstellar and never emit here. */
export type LineKind = 'permitted' | 'forbidden' | 'semi-forbidden' | 'absorption';

/** One line of the list. */
export interface LineEntry {
  /** Ion and vacuum wavelength, e.g. `[O III] 5008`, `H-alpha 6565`. */
  readonly name: string;
  readonly ion: string;
  /** Rest wavelength in vacuum, ångström. */
  readonly wavelengthVacuum: number;
  readonly kind: LineKind;
  /** Photon energy, eV. */
  readonly photonEnergyEv: number;
  /** Series and principal quantum numbers, hydrogen only. */
  readonly series?: 'Lyman' | 'Balmer' | 'Paschen';
  readonly lowerLevel?: number;
  readonly upperLevel?: number;
  /** Flux of the named stronger line divided by the flux of this one, where atomic physics fixes it (same upper level). */
  readonly tiedTo?: { readonly name: string; readonly strongerOverThis: number; readonly source: string };
  /** Where the wavelength comes from. */
  readonly source: string;
}

/**
 * Makes a line list entry and derives its photon energy.
 *
 * @param ion ion with brackets for forbidden lines, or the hydrogen name such as `H-alpha`
 * @param wavelengthVacuum vacuum ångström
 */
export function lineEntry(
  ion: string,
  wavelengthVacuum: number,
  kind: LineKind,
  source: string,
  more: Partial<LineEntry> = {},
): LineEntry {
  const name = `${ion} ${Math.round(wavelengthVacuum)}`;
  return Object.freeze({
    name,
    ion,
    wavelengthVacuum,
    kind,
    photonEnergyEv: HC_EV_ANGSTROM / wavelengthVacuum,
    source,
    ...more,
  });
}
