import type { Random } from './random';
import type { ArmRecipe, NoiseRecipe } from './recipe';

/** Kinds of spectrograph the simulator knows; ranges in vacuum ångström, none of them a real instrument's. */
export const INSTRUMENT_KINDS = [
  'optical wide',
  'optical blue',
  'red high resolution',
  'low resolution',
  'two arms',
  'three arms',
  'near infrared',
  'K band',
] as const;
export type InstrumentKind = (typeof INSTRUMENT_KINDS)[number];

/** Draws the arms of a spectrograph of the kind: resolving power 300 to 8,000, 1.8 to 4 pixels a FWHM, linear or logarithmic axes. */
export function drawArms(kind: InstrumentKind, random: Random): ArmRecipe[] {
  const arms = layArms(kind, random);
  // the drawn ends may cross: arms must follow one another with at least 3 Å between
  for (let i = 1; i < arms.length; i++) arms[i].start = Math.max(arms[i].start, arms[i - 1].end + 3);
  return arms;
}

function layArms(kind: InstrumentKind, random: Random): ArmRecipe[] {
  const arm = (start: number, end: number, resolvingPower: number, likelyLog = 0.4): ArmRecipe => ({
    start: start * random.uniform(0.99, 1.01),
    end: end * random.uniform(0.99, 1.01),
    axis: random.chance(likelyLog) ? 'log' : 'linear',
    resolvingPower,
    constantFwhm: random.chance(0.6),
    pixelsPerFwhm: random.uniform(2, 4),
  });
  switch (kind) {
    case 'optical wide':
      return [arm(random.uniform(3600, 3900), random.uniform(8900, 10300), random.uniform(1200, 2600), 0.6)];
    case 'optical blue':
      return [arm(random.uniform(3400, 3900), random.uniform(5900, 7400), random.uniform(800, 2500))];
    case 'red high resolution': {
      const start = random.uniform(6000, 7200);
      return [arm(start, start + random.uniform(1500, 2600), random.uniform(4000, 8000))];
    }
    case 'low resolution':
      return [arm(random.uniform(3900, 5200), random.uniform(8500, 9900), random.uniform(300, 800))];
    case 'two arms': {
      const blueEnd = random.uniform(5600, 6000);
      return [
        arm(random.uniform(3500, 3800), blueEnd, random.uniform(1200, 2500), 0.2),
        arm(blueEnd + random.uniform(40, 250), random.uniform(9000, 10000), random.uniform(2000, 4500), 0.2),
      ];
    }
    case 'three arms': {
      const first = random.uniform(5500, 5900);
      const second = random.uniform(7300, 7700);
      return [
        arm(3600, first, random.uniform(1800, 2800), 0.1),
        arm(first + random.uniform(5, 60), second, random.uniform(3000, 4200), 0.1),
        arm(second + random.uniform(5, 60), 9800, random.uniform(3800, 5200), 0.1),
      ];
    }
    case 'near infrared':
      return random.chance(0.5)
        ? [arm(9700, 13400, random.uniform(2000, 4000))]
        : [arm(11500, 13400, random.uniform(2500, 4000), 0.2), arm(14700, 18000, random.uniform(2500, 4000), 0.2)];
    case 'K band':
      return [arm(19500, random.uniform(23500, 25000), random.uniform(2500, 4000))];
  }
}

/** Draws one of the kinds, optical ones more often. */
export function drawInstrumentKind(random: Random): InstrumentKind {
  const u = random.uniform();
  if (u < 0.3) return 'optical wide';
  if (u < 0.4) return 'optical blue';
  if (u < 0.52) return 'red high resolution';
  if (u < 0.62) return 'low resolution';
  if (u < 0.76) return 'two arms';
  if (u < 0.84) return 'three arms';
  if (u < 0.94) return 'near infrared';
  return 'K band';
}

/** Noise and faults of an ordinary night: each fault comes up in a share of the spectra only. */
export function drawNoise(random: Random): NoiseRecipe {
  return {
    level: random.logUniform(0.02, 0.6),
    endRise: random.uniform(0.2, 0.9),
    skyLines: random.logUniform(8, 60),
    // half a per cent of a bright sky line is about its own photon noise
    skyResidual: random.chance(0.6) ? random.normal(0, 0.005) : 0,
    skyShiftPixels: random.chance(0.5) ? random.normal(0, 0.012) : 0,
    telluric: random.chance(0.4) ? random.uniform(0.4, 1.2) : 0,
    resampled: random.chance(0.3),
    declaredErrorFactor: random.chance(0.25) ? random.logUniform(0.65, 1.4) : 1,
    cosmicRays: random.chance(0.35) ? random.integer(1, 2) : 0,
    badRuns: random.chance(0.4) ? random.integer(1, 4) : 0,
    lsfError: random.chance(0.2) ? random.uniform(0.93, 1.07) : 1,
  };
}

/** White noise of known variance and nothing else. */
export function plainNoise(random: Random): NoiseRecipe {
  return {
    level: random.logUniform(0.02, 0.6),
    endRise: random.uniform(0, 0.5),
    skyLines: 0,
    skyResidual: 0,
    skyShiftPixels: 0,
    telluric: 0,
    resampled: false,
    declaredErrorFactor: 1,
    cosmicRays: 0,
    badRuns: 0,
    lsfError: 1,
  };
}
