import { lineEntry, type LineEntry } from './line-entry';

const NIST = 'NIST ASD energy levels, 1e8 / (E_upper - E_lower)';
const NIST_MEMORY = 'NIST ASD (from memory)';
const MULTIPLET =
  'multiplet centroid of the NIST ASD fine-structure components (from memory, within 0.03 Å of single components)';
const STOREY_ZEIPPEN = 'Storey & Zeippen (2000, MNRAS 312, 813)';
const WEIGHTS = 'statistical weights of the lower levels (common practice)';

const forbidden = (ion: string, wavelength: number, more: Partial<LineEntry> = {}) =>
  lineEntry(ion, wavelength, 'forbidden', NIST, more);
const permitted = (ion: string, wavelength: number, source = NIST) => lineEntry(ion, wavelength, 'permitted', source);

/** Emission lines other than hydrogen, vacuum ångström. */
export const ION_LINES: readonly LineEntry[] = [
  permitted('N V', 1238.8212),
  permitted('N V', 1242.8042),
  permitted('Si IV', 1393.7546),
  permitted('Si IV', 1402.7697),
  permitted('C IV', 1548.1865),
  permitted('C IV', 1550.7723),
  permitted('He II', 1640.42, MULTIPLET),
  permitted('Al III', 1854.716, NIST_MEMORY),
  permitted('Al III', 1862.79, NIST_MEMORY),
  lineEntry('Si III]', 1892.03, 'semi-forbidden', NIST_MEMORY),
  lineEntry('[C III]', 1906.6828, 'forbidden', NIST),
  lineEntry('C III]', 1908.7339, 'semi-forbidden', NIST),
  permitted('Mg II', 2796.3518),
  permitted('Mg II', 2803.5305),
  permitted('He II', 3204.03, MULTIPLET),
  forbidden('[Ne V]', 3346.7826, {
    tiedTo: { name: '[Ne V] 3427', strongerOverThis: 2.73, source: 'NIST ASD transition probabilities (from memory)' },
  }),
  forbidden('[Ne V]', 3426.8635),
  forbidden('[O II]', 3727.0919),
  forbidden('[O II]', 3729.875),
  forbidden('[Ne III]', 3869.8612),
  permitted('He I', 3889.7508),
  forbidden('[Ne III]', 3968.5935, {
    tiedTo: {
      name: '[Ne III] 3870',
      strongerOverThis: 3.32,
      source: 'NIST ASD transition probabilities (from memory)',
    },
  }),
  forbidden('[S II]', 4069.749),
  forbidden('[S II]', 4077.5002),
  forbidden('[O III]', 4364.4356),
  permitted('He I', 4472.735, MULTIPLET),
  permitted('He II', 4687.02, MULTIPLET),
  forbidden('[O III]', 4960.2948, {
    tiedTo: { name: '[O III] 5008', strongerOverThis: 2.98, source: STOREY_ZEIPPEN },
  }),
  forbidden('[O III]', 5008.2396),
  permitted('He I', 5017.0769),
  permitted('He II', 5413.03, MULTIPLET),
  forbidden('[O I]', 5578.8874),
  forbidden('[N II]', 5756.1908),
  permitted('He I', 5877.25, MULTIPLET),
  forbidden('[O I]', 6302.0462),
  forbidden('[S III]', 6313.81),
  forbidden('[O I]', 6365.5357, { tiedTo: { name: '[O I] 6302', strongerOverThis: 3.0, source: WEIGHTS } }),
  forbidden('[N II]', 6549.8608, {
    tiedTo: { name: '[N II] 6585', strongerOverThis: 3.05, source: STOREY_ZEIPPEN },
  }),
  forbidden('[N II]', 6585.2727),
  permitted('He I', 6679.9956),
  forbidden('[S II]', 6718.2945),
  forbidden('[S II]', 6732.6738),
  permitted('He I', 7067.135, MULTIPLET),
  forbidden('[Ar III]', 7137.7587),
  forbidden('[O II]', 7322.0057),
  forbidden('[O II]', 7332.7545),
  forbidden('[Ar III]', 7753.2422, {
    tiedTo: { name: '[Ar III] 7138', strongerOverThis: 4.1, source: 'NIST ASD transition probabilities (from memory)' },
  }),
  forbidden('[S III]', 9071.11, {
    tiedTo: {
      name: '[S III] 9533',
      strongerOverThis: 2.47,
      source: 'Mendoza & Zeippen (1982, MNRAS 199, 1025), from memory',
    },
  }),
  forbidden('[S III]', 9533.24),
  permitted('He I', 10833.3064),
];

const STELLAR = 'NIST ASD vacuum wavelengths (from memory); bands: flux-weighted centres, common practice';
const absorption = (ion: string, wavelength: number) => lineEntry(ion, wavelength, 'absorption', STELLAR);

/** Stellar absorption features, vacuum ångström, for spectra without emission. Balmer absorption uses the Balmer entries. */
export const ABSORPTION_LINES: readonly LineEntry[] = [
  absorption('Ca II K', 3934.775),
  absorption('Ca II H', 3969.59),
  absorption('Ca I', 4227.92),
  absorption('G band', 4305.61),
  absorption('Mg I', 5168.76),
  absorption('Mg I', 5174.13),
  absorption('Mg I', 5185.05),
  absorption('Fe I', 5271.5),
  absorption('Fe I', 5336.9),
  absorption('Na I', 5891.58),
  absorption('Na I', 5897.56),
  absorption('Ca II', 8500.36),
  absorption('Ca II', 8544.44),
  absorption('Ca II', 8664.52),
];
