import { drawDemoNoise, observeDemoTarget, type DemoSpectrum, type PlacedDemoTarget } from './demo-observe';
import { drawDemoTargets } from './demo-targets';
import { Random } from './random';

/** Seed that the demo uses. */
export const DEMO_SEED = 20260914;

/** Fields of the night: centre and start of the first exposure, UTC; each near the meridian from this site then. */
const FIELDS = [
  { raDegrees: 305.4, decDegrees: -32.4, start: '2026-09-15T00:24:10' },
  { raDegrees: 338.1, decDegrees: -28.9, start: '2026-09-15T02:11:35' },
  { raDegrees: 9.8, decDegrees: -34.7, start: '2026-09-15T04:02:50' },
  { raDegrees: 38.9, decDegrees: -30.2, start: '2026-09-15T05:49:05' },
  { raDegrees: 63.2, decDegrees: -31.3, start: '2026-09-15T07:36:40' },
] as const;
const FIELD_RADIUS_DEGREES = 0.45;
/** The wavelength scale wanders as the spectrograph cools, km/s from evening to morning. */
const DRIFT_KMS = [-1.6, 1.8] as const;
/** How well the wavelengths of one fibre are known, km/s. */
const FIBRE_SCATTER_KMS = 0.7;

function pad(value: number, digits: number): string {
  return String(value).padStart(digits, '0');
}

/** `J0412.6-3120`: right ascension cut to tenths of a minute, declination to minutes, as the IAU asks (cut, not rounded). */
export function positionName(raDegrees: number, decDegrees: number): string {
  const tenths = Math.floor((raDegrees / 15) * 600 + 1e-9);
  const hours = Math.floor(tenths / 600);
  const minutes = (tenths - hours * 600) / 10;
  const arcMinutes = Math.floor(Math.abs(decDegrees) * 60 + 1e-9);
  const sign = decDegrees < 0 ? '-' : '+';
  const minuteText = minutes.toFixed(1).padStart(4, '0');
  return `J${pad(hours, 2)}${minuteText}${sign}${pad(Math.floor(arcMinutes / 60), 2)}${pad(arcMinutes % 60, 2)}`;
}

function place(field: (typeof FIELDS)[number], taken: Set<string>, random: Random): [number, number, string] {
  for (;;) {
    const radius = FIELD_RADIUS_DEGREES * Math.sqrt(random.uniform());
    const angle = random.uniform(0, 2 * Math.PI);
    const dec = field.decDegrees + radius * Math.sin(angle);
    const ra = field.raDegrees + (radius * Math.cos(angle)) / Math.cos((dec * Math.PI) / 180);
    const name = positionName(ra, dec);
    if (taken.has(name)) continue;
    taken.add(name);
    // a catalogue lists positions to 0.1 arcsec
    return [Number(ra.toFixed(5)), Number(dec.toFixed(5)), name];
  }
}

/** Targets of the demo with their fields, in observing order, and the seeds of their first spectra. */
export function demoTargets(seed = DEMO_SEED): (PlacedDemoTarget & { field: number; firstSeed: number })[] {
  const random = new Random(seed);
  const targets = drawDemoTargets(random);
  const taken = new Set<string>();
  return targets.map((target, i) => {
    const field = Math.floor((i * FIELDS.length) / targets.length);
    const [raDegrees, decDegrees, position] = place(FIELDS[field], taken, random);
    const noise = drawDemoNoise(target, random);
    return { target, raDegrees, decDegrees, position, noise, field, firstSeed: random.integer(1, 2 ** 31) };
  });
}

/** Start of a field's first exposure so many nights after the main one, Unix time in milliseconds: 236 s earlier each night. */
export function demoFieldStartMs(field: number, nights = 0): number {
  return Date.parse(`${FIELDS[field].start}Z`) + nights * (86_400_000 - 236_000);
}

/**
 * One invented night of the demo observatory: 120 spectra in five fields, three exposures of 900 s each, from evening to morning. Seven in
 * ten are star-forming galaxies between z = 0.05 and 1.5; the rest are active nuclei, quasars, Lyman-alpha emitters, passive galaxies,
 * stars, sky, blends and lone lines. Everything follows from the seed.
 *
 * @param seed the demo's own when left out
 */
export function demoNight(seed = DEMO_SEED): DemoSpectrum[] {
  const [evening, morning] = DRIFT_KMS;
  return demoTargets(seed).map(({ field, firstSeed, ...target }) => {
    const fibreKms = new Random(firstSeed).normal(0, FIBRE_SCATTER_KMS);
    const slipKms = evening + ((morning - evening) * field) / (FIELDS.length - 1) + fibreKms;
    return observeDemoTarget(target, { startMs: demoFieldStartMs(field), slipKms, seed: firstSeed });
  });
}
