import { DEMO_SEED, demoFieldStartMs, demoTargets } from './demo-night';
import { demoNextStartMs, observeDemoTarget, stackDemoExposures, type DemoSpectrum } from './demo-observe';

/** Further spectra of the demo's targets, of one of the nights before the main one. */
export interface EarlierDemoNight {
  /** Civil date of the preceding noon, ISO 8601. */
  civilDate: string;
  notes: string;
  spectra: DemoSpectrum[];
}

/** Targets of the main night that are repeated: so many of the first of each field. */
const REPEATS_A_FIELD = 5;
/** The field during which the grating slipped on the first night, and by how much, km/s. */
const SLIPPED_FIELD = 3;
const SLIP_KMS = 24;
/** Place within its field of the target that was kept as single exposures and as their stack. */
const STACKED = 6;

const ofField = <T extends { field: number }>(targets: readonly T[], field: number, from: number, to: number) =>
  targets.filter((target) => target.field === field).slice(from, to);

/** Two neighbours whose fibres were swapped: each spectrum bears the other's name and file name. */
function swapNames(spectra: DemoSpectrum[], a: number, b: number): void {
  const [first, second] = [spectra[a], spectra[b]];
  spectra[a] = {
    ...first,
    name: second.name,
    fileStem: second.fileStem,
    header: { ...first.header, OBJECT: second.header.OBJECT },
  };
  spectra[b] = {
    ...second,
    name: first.name,
    fileStem: first.fileStem,
    header: { ...second.header, OBJECT: first.header.OBJECT },
  };
}

/**
 * The two nights before the main one. The first repeats targets of three fields; the grating slips during the last of
 * them, and two of its spectra come again in a reduction that put it right. The second repeats two fields with less
 * exposure, keeps one target as three single exposures beside their stack, and has two fibres swapped.
 */
export function earlierDemoNights(seed = DEMO_SEED): EarlierDemoNight[] {
  const targets = demoTargets(seed);
  const first = [0, 1, SLIPPED_FIELD].flatMap((field) =>
    ofField(targets, field, 0, REPEATS_A_FIELD).map((target, i) => {
      const slipKms = field === SLIPPED_FIELD ? SLIP_KMS : 0.6 * field;
      const seedNow = target.firstSeed + 1;
      const startMs = demoFieldStartMs(field, -2);
      const spectrum = observeDemoTarget(target, { startMs, slipKms, seed: seedNow });
      if (field !== SLIPPED_FIELD || i > 1) return [spectrum];
      const again = observeDemoTarget(target, { startMs, slipKms: 0.5, seed: seedNow });
      return [spectrum, { ...again, fileStem: `${again.fileStem}-again` }];
    }),
  );
  const second = [0, 2].flatMap((field) =>
    ofField(targets, field, field, field + REPEATS_A_FIELD).map((target) =>
      observeDemoTarget(target, {
        startMs: demoFieldStartMs(field, -1),
        exposures: 2,
        slipKms: -0.8,
        seed: target.firstSeed + 2,
      }),
    ),
  );
  swapNames(second, 1, 2);
  const [stacked] = ofField(targets, 4, STACKED, STACKED + 1);
  let startMs = demoFieldStartMs(4, -1);
  const singles = [0, 1, 2].map((exposure) => {
    const single = observeDemoTarget(stacked, {
      startMs,
      exposures: 1,
      slipKms: 0.9,
      seed: stacked.firstSeed + 3 + exposure,
    });
    startMs = demoNextStartMs(startMs);
    return single;
  });
  const stack = stackDemoExposures(singles);
  return [
    {
      civilDate: '2026-09-12',
      notes: 'Three fields for repeats. The grating slipped before the last: 24 km/s too red until it was reset.',
      spectra: first.flat(),
    },
    {
      civilDate: '2026-09-13',
      notes: 'Thin cloud, two exposures of 900 s a field; one target kept as single exposures and as their stack.',
      spectra: [
        ...second,
        ...singles.map((single, i) => ({ ...single, fileStem: `${single.fileStem}-${i + 1}` })),
        { ...stack, fileStem: `${stack.fileStem}-stack` },
      ],
    },
  ];
}
