import { drawLymanAlpha } from './draw-lyman-alpha';
import { drawActiveNucleus, drawPassive, drawStar, drawStarForming } from './draw-object';
import { drawQuasar } from './draw-quasar';
import type { Random } from './random';
import type { ObjectRecipe, SpectrumClass } from './recipe';

/** What one target of the demo night is. */
export interface DemoTarget {
  class: SpectrumClass;
  objects: ObjectRecipe[];
  signalToNoise: number;
  /** Second object's best line over the first one's. */
  secondRatio: number;
  /** Strong sky-line residuals, as a badly placed sky aperture leaves. */
  skyContaminated: boolean;
}

/** Redshift of a galaxy of the survey, 0.05 to 1.5, most of them between 0.2 and 0.9. */
function surveyRedshift(random: Random): number {
  return 0.05 + 1.45 * Math.pow(random.uniform(), 1.5);
}

/** Signal-to-noise ratio of the best line: most are easy, a sixth is at the limit. */
function surveySignal(random: Random): number {
  const u = random.uniform();
  if (u < 0.6) return random.logUniform(12, 80);
  return u < 0.84 ? random.uniform(6, 12) : random.uniform(3, 6);
}

type Draw = (random: Random) => Omit<DemoTarget, 'skyContaminated' | 'secondRatio'> & { secondRatio?: number };

const galaxy: Draw = (random) => ({
  class: 'star-forming',
  objects: [drawStarForming(random, surveyRedshift(random))],
  signalToNoise: surveySignal(random),
});

/** Each kind of target and how many the night has. */
const KINDS: readonly (readonly [count: number, draw: Draw])[] = [
  [84, galaxy],
  [
    6,
    (random) => ({
      class: 'active nucleus',
      objects: [drawActiveNucleus(random, random.uniform(0.05, 0.8), false)],
      signalToNoise: random.logUniform(12, 80),
    }),
  ],
  [
    2,
    (random) => ({
      class: 'shock-like',
      objects: [drawActiveNucleus(random, random.uniform(0.03, 0.4), true)],
      signalToNoise: random.logUniform(12, 50),
    }),
  ],
  [
    6,
    (random) => ({
      class: 'quasar',
      objects: [drawQuasar(random, random.uniform(0.4, 3.6))],
      signalToNoise: random.logUniform(40, 200),
    }),
  ],
  [
    5,
    (random) => ({
      class: 'lyman-alpha emitter',
      objects: [drawLymanAlpha(random, random.uniform(2.4, 6.2), random.chance(0.4))],
      signalToNoise: random.logUniform(7, 40),
    }),
  ],
  [
    5,
    (random) => ({
      class: 'passive',
      objects: [drawPassive(random, random.uniform(0.1, 0.8))],
      signalToNoise: random.logUniform(3, 20),
    }),
  ],
  [4, (random) => ({ class: 'star', objects: [drawStar(random)], signalToNoise: random.logUniform(6, 40) })],
  [3, () => ({ class: 'empty sky', objects: [], signalToNoise: 1 })],
  [
    2,
    (random) => ({
      class: 'two redshifts',
      objects: [drawStarForming(random, random.uniform(0.1, 0.5)), drawStarForming(random, random.uniform(0.55, 1.1))],
      signalToNoise: random.logUniform(15, 50),
      secondRatio: random.uniform(0.5, 1),
    }),
  ],
  [
    3,
    // beyond z = 1.05 H-beta has left the red end: [O II] stands alone
    (random) => ({
      class: 'single line',
      objects: [drawStarForming(random, random.uniform(1.1, 1.5))],
      signalToNoise: random.uniform(8, 14),
    }),
  ],
];

/** All targets of a night in observing order, kinds well mixed. */
export function drawDemoTargets(random: Random): DemoTarget[] {
  const targets: DemoTarget[] = [];
  for (const [count, draw] of KINDS) {
    for (let i = 0; i < count; i++) {
      targets.push({ secondRatio: 1, ...draw(random), skyContaminated: random.chance(0.04) });
    }
  }
  // shuffle by Fisher & Yates (1938)
  for (let i = targets.length - 1; i > 0; i--) {
    const j = random.integer(0, i);
    [targets[i], targets[j]] = [targets[j], targets[i]];
  }
  return targets;
}
