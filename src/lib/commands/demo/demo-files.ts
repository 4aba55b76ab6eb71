import { writeSpectrumImage } from '$lib/formats/write-spectrum';
import { demoNight } from '$lib/science/simulate/demo-night';
import { earlierDemoNights } from '$lib/science/simulate/demo-nights';
import { DEMO_INSTRUMENT, DEMO_SITE, type DemoSpectrum } from '$lib/science/simulate/demo-observe';
import type { Instrument } from '$lib/domain/instrument';

/** The demo's spectrograph as an observer would describe it. */
export const demoInstrument: Instrument = {
  name: DEMO_INSTRUMENT.name,
  medium: 'vacuum',
  specsys: 'TOPOCENT',
  resolutionFwhmAngstrom: DEMO_INSTRUMENT.fwhmAngstrom,
  site: {
    latitudeDegrees: DEMO_SITE.latitudeDegrees,
    longitudeEastDegrees: DEMO_SITE.longitudeEastDegrees,
    heightMetres: DEMO_SITE.heightMetres,
  },
};

function write({ header, ...spectrum }: DemoSpectrum): Uint8Array {
  const text = (key: string) => String(header[key]);
  const number = (key: string) => Number(header[key]);
  return writeSpectrumImage({
    ...spectrum,
    name: text('OBJECT'),
    medium: 'vacuum',
    specsys: text('SPECSYS'),
    dateObs: text('DATE-OBS'),
    exposureSeconds: number('XPOSURE'),
    observatoryMetres: [number('OBSGEO-X'), number('OBSGEO-Y'), number('OBSGEO-Z')],
    cards: {
      'DATE-AVG': text('DATE-AVG'),
      NEXPOSUR: number('NEXPOSUR'),
      OBSERVAT: text('OBSERVAT'),
      INSTRUME: text('INSTRUME'),
      COMMENT: 'Simulated. The observatory, the night and the object are invented.',
    },
  });
}

export interface DemoFile {
  name: string;
  bytes: Uint8Array;
}

/** The demo's main night as FITS files, the same bytes every time. */
export function demoFiles(): DemoFile[] {
  return demoNight().map((spectrum) => ({ name: `${spectrum.fileStem}.fits`, bytes: write(spectrum) }));
}

/** The two nights before it, each with a few files that cannot be read as they are. */
export function earlierDemoFiles(): { civilDate: string; notes: string; files: DemoFile[] }[] {
  return earlierDemoNights().map(({ civilDate, notes, spectra }, night) => {
    const files = spectra.map((spectrum) => ({ name: `${spectrum.fileStem}.fits`, bytes: write(spectrum) }));
    return { civilDate, notes, files: [...files, ...(night === 0 ? badFiles(files[0]) : [])] };
  });
}

/** What a folder at the telescope holds besides spectra: a log, a file cut by a full disk, a quick look without numbers. */
function badFiles(whole: DemoFile): DemoFile[] {
  const text = (lines: string[]) => new TextEncoder().encode(`${lines.join('\n')}\n`);
  const log = ['Night log', '23:50 dome open', '05:10 grating slipped, reset', '09:02 dome closed'];
  const quickLook = ['wavelength,flux,error', ...Array.from({ length: 40 }, (_, i) => `${4000 + i},nan,nan`)];
  return [
    { name: 'night-log.txt', bytes: text(log) },
    { name: whole.name.replace('.fits', '-cut.fits'), bytes: whole.bytes.slice(0, 20_000) },
    { name: 'quick-look.csv', bytes: text(quickLook) },
  ];
}

const ZERO_POINT_AB = 48.6;
/** Where the red magnitude is taken, ångström. */
const RED = [5600, 6800] as const;

/** The programme's target list: magnitudes from the spectra themselves, faint ones urgent, a few not observed yet. */
export function demoTargetList(): DemoFile {
  const rows = demoNight().map(({ name, raDegrees, decDegrees, wavelength, flux }, i) => {
    const red = flux.filter((_, k) => wavelength[k] > RED[0] && wavelength[k] < RED[1]);
    const mean = red.reduce((sum, value) => sum + value, 0) / red.length;
    const middle = (RED[0] + RED[1]) / 2;
    // AB magnitude of a mean flux density a wavelength, erg/s/cm2/Å: f_nu = f_lambda lambda^2 / c (Oke & Gunn 1983)
    const fNu = (Math.max(mean, 0.005) * 1e-17 * middle ** 2) / 2.99792458e18;
    const magnitude = -2.5 * Math.log10(fNu) - ZERO_POINT_AB;
    return [name, raDegrees, decDegrees, magnitude.toFixed(2), 1 + (i % 3)].join(',');
  });
  const waiting = ['HC waiting 1,63.40000,-31.52000,22.10,9', 'HC waiting 2,63.41000,-31.50000,22.70,9'];
  return {
    name: 'halloran-targets.csv',
    bytes: new TextEncoder().encode(`${['name,ra (deg),dec (deg),r_mag,priority', ...rows, ...waiting].join('\n')}\n`),
  };
}
