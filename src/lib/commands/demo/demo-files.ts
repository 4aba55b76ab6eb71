import { writeSpectrumImage } from '$lib/formats/write-spectrum';
import { DEMO_INSTRUMENT, DEMO_SITE, demoNight, type DemoSpectrum } from '$lib/science/simulate/demo-night';
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

/** The demo night as FITS files, the same bytes every time. */
export function demoFiles(): { name: string; bytes: Uint8Array }[] {
  return demoNight().map((spectrum) => ({ name: `${spectrum.fileStem}.fits`, bytes: write(spectrum) }));
}
