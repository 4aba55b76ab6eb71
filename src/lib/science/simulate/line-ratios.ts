import type { Random } from './random';
import type { Strengths } from './emission-lines';

/**
 * Case B ratios to H-beta over temperature and density: H-alpha 2.75 to 3.04, the higher members falling slightly with it
 * (Storey & Hummer 1995, as in tests/reference/data/line-physics.json); Paschen at 10,000 K from Osterbrock & Ferland (2006), table
 * 4.4, from memory.
 */
export function hydrogenRatios(halphaOverHbeta: number): Strengths {
  const cool = (halphaOverHbeta - 2.8632) / (3.0409 - 2.8632);
  return {
    'H-alpha 6565': halphaOverHbeta,
    'H-beta 4863': 1,
    'H-gamma 4342': 0.4683 - 0.0099 * cool,
    'H-delta 4103': 0.2589 - 0.0074 * cool,
    'H-epsilon 3971': 0.159 - 0.005 * cool,
    'H-zeta 3890': 0.105 - 0.003 * cool,
    'H-eta 3836': 0.0731,
    'Paschen-delta 10052': 0.0555,
    'Paschen-gamma 10941': 0.0904,
    'Paschen-beta 12822': 0.163,
    'Paschen-alpha 18756': 0.339,
  };
}

/** [O II] 3730/3727 and [S II] 6718/6733 of one density, cm-3, by fits of the two-level form within the published limits. */
export function densityRatios(density: number): { oxygen: number; sulphur: number } {
  // Sanders et al. (2016, ApJ 816, 23), eq. 6 and table 2 (from memory): R = a (b + n) / (c + n)
  const oxygen = (0.3771 * (2468 + density)) / (638.4 + density);
  const sulphur = (0.4315 * (2107 + density)) / (627.1 + density);
  return { oxygen, sulphur };
}

/** Oxygen abundance 12 + log(O/H) relative to the Sun's 8.69. */
type Metallicity = number;

function polynomial(x: number, ...c: number[]): number {
  return c.reduceRight((sum, value) => sum * x + value, 0);
}

/** Splits a doublet of given sum by the ratio of its first member to its second. */
function split(sum: number, firstOverSecond: number): [number, number] {
  return [(sum * firstOverSecond) / (1 + firstOverSecond), sum / (1 + firstOverSecond)];
}

/**
 * Line strengths of an H II galaxy relative to H-beta, before dust.
 *
 * The strong-line calibrations of Maiolino et al. (2008, A&A 488, 463), table 4 (from memory), at x = 12 + log(O/H) - 8.69, each with
 * log-normal scatter of 0.1 to 0.2 dex; weaker lines by typical ratios to hydrogen (common practice, no source).
 *
 * @param x metallicity relative to solar, about -1.3 to 0.4
 */
export function starFormingRatios(x: Metallicity, random: Random): Strengths {
  const scatter = (dex: number) => Math.pow(10, random.normal(0, dex));
  const halpha = Math.min(3.06, Math.max(2.72, 2.86 + 0.1 * x + random.normal(0, 0.03)));
  const hydrogen = hydrogenRatios(halpha);
  const ionisation = random.normal(0, 0.1); // moves [O III] up and [O II] down together
  const oxygenThree = Math.pow(10, polynomial(x, 0.1549, -1.5031, -0.979, -0.0297) + ionisation) * scatter(0.07);
  const oxygenTwo =
    (oxygenThree / Math.pow(10, polynomial(x, -0.2839, -1.3881, -0.3172) + 2 * ionisation)) * scatter(0.1);
  const nitrogen = halpha * Math.pow(10, polynomial(x, -0.7732, 1.2357, -0.2811, -0.7201, -0.333)) * scatter(0.12);
  const sulphur = halpha * Math.pow(10, -0.5 - 0.35 * (x + 0.2) ** 2 - 0.5 * ionisation) * scatter(0.1);
  const density = random.logUniform(10, 1500);
  const ratio = densityRatios(density);
  const [oxygenRed, oxygenBlue] = split(oxygenTwo, ratio.oxygen);
  const [sulphurBlue, sulphurRed] = split(sulphur, ratio.sulphur);
  const neon = oxygenTwo * Math.pow(10, polynomial(x, -1.2608, -1.0861, -0.147)) * scatter(0.1);
  const helium = 0.12 * scatter(0.06);
  const sulphurThree = 0.35 * scatter(0.2);
  return {
    ...hydrogen,
    '[O III] 5008': oxygenThree,
    '[O III] 4960': oxygenThree / 2.984,
    '[O III] 4364': oxygenThree * 0.012 * Math.pow(10, -0.7 * (x + 0.7)) * scatter(0.15),
    '[O II] 3730': oxygenRed,
    '[O II] 3727': oxygenBlue,
    '[O II] 7322': oxygenTwo * 0.013,
    '[O II] 7333': oxygenTwo * 0.011,
    '[N II] 6585': nitrogen,
    '[N II] 6550': nitrogen / 2.96,
    '[S II] 6718': sulphurBlue,
    '[S II] 6733': sulphurRed,
    '[Ne III] 3870': neon,
    '[Ne III] 3969': neon / 3.32,
    '[O I] 6302': halpha * 0.025 * scatter(0.25),
    'He I 5877': helium,
    'He I 4473': helium * 0.37,
    'He I 6680': helium * 0.28,
    'He I 7067': helium * 0.2,
    'He I 10833': helium * 3 * scatter(0.2),
    '[Ar III] 7138': 0.09 * scatter(0.15),
    '[S III] 9071': sulphurThree / 2.47,
    '[S III] 9533': sulphurThree,
    'C III] 1909': x < -0.5 ? 0.25 * scatter(0.3) : 0,
    '[C III] 1907': x < -0.5 ? 0.36 * scatter(0.3) : 0,
  };
}

/**
 * Narrow-line region of an active nucleus, relative to H-beta before dust: ratios spread over what Seyfert 2 galaxies show above the
 * curve of Kewley et al. (2001). Ranges from memory of Osterbrock & Ferland (2006), chapter 14.
 */
export function activeNucleusRatios(random: Random): Strengths {
  const oxygenThree = random.logUniform(4, 15);
  const oxygenTwo = oxygenThree * random.logUniform(0.1, 0.6);
  const halpha = random.uniform(2.85, 3.2);
  const nitrogen = halpha * random.logUniform(0.45, 2);
  const sulphur = halpha * random.logUniform(0.25, 0.9);
  const oxygenOne = halpha * random.logUniform(0.05, 0.3);
  const ratio = densityRatios(random.logUniform(100, 3000));
  const [oxygenRed, oxygenBlue] = split(oxygenTwo, ratio.oxygen);
  const [sulphurBlue, sulphurRed] = split(sulphur, ratio.sulphur);
  const neonFive = oxygenThree * random.logUniform(0.02, 0.15);
  const neon = oxygenThree * random.uniform(0.06, 0.14);
  const carbon = random.logUniform(3, 15);
  return {
    ...hydrogenRatios(halpha),
    '[O III] 5008': oxygenThree,
    '[O III] 4960': oxygenThree / 2.984,
    '[O III] 4364': oxygenThree * random.uniform(0.01, 0.025),
    '[O II] 3730': oxygenRed,
    '[O II] 3727': oxygenBlue,
    '[N II] 6585': nitrogen,
    '[N II] 6550': nitrogen / 2.96,
    '[S II] 6718': sulphurBlue,
    '[S II] 6733': sulphurRed,
    '[O I] 6302': oxygenOne,
    '[O I] 6366': oxygenOne / 3.05,
    '[Ne III] 3870': neon,
    '[Ne III] 3969': neon / 3.32,
    '[Ne V] 3427': neonFive,
    '[Ne V] 3347': neonFive / 2.75,
    'He II 4687': random.uniform(0.1, 0.35),
    'He I 5877': random.uniform(0.08, 0.15),
    '[N I] 5201': random.uniform(0.02, 0.12),
    '[Ar III] 7138': random.uniform(0.1, 0.3),
    '[S III] 9533': random.uniform(0.8, 2),
    '[S III] 9071': random.uniform(0.3, 0.8),
    'Lyman-alpha 1216': random.logUniform(10, 50),
    'N V 1239': random.uniform(0.3, 2),
    'N V 1243': random.uniform(0.3, 1.5),
    'C IV 1548': carbon * 0.6,
    'C IV 1551': carbon * 0.4,
    'He II 1640': carbon * random.uniform(0.4, 1),
    '[C III] 1907': carbon * random.uniform(0.15, 0.35),
    'C III] 1909': carbon * random.uniform(0.15, 0.3),
    'Mg II 2796': random.uniform(0.5, 1.5),
    'Mg II 2804': random.uniform(0.3, 0.9),
  };
}

/** Shock-heated or low-ionisation gas relative to H-beta: strong [O II], [N II], [S II], [O I], weak [O III]; from memory of Dopita & Sutherland (1995). */
export function shockRatios(random: Random): Strengths {
  const halpha = random.uniform(2.85, 3.2);
  const oxygenThree = random.logUniform(0.8, 4);
  const oxygenTwo = random.logUniform(3, 10);
  const nitrogen = halpha * random.logUniform(0.5, 2.2);
  const sulphur = halpha * random.logUniform(0.5, 1.5);
  const oxygenOne = halpha * random.logUniform(0.12, 0.6);
  const ratio = densityRatios(random.logUniform(30, 1000));
  const [oxygenRed, oxygenBlue] = split(oxygenTwo, ratio.oxygen);
  const [sulphurBlue, sulphurRed] = split(sulphur, ratio.sulphur);
  const neon = random.uniform(0.15, 0.8);
  return {
    ...hydrogenRatios(halpha),
    '[O III] 5008': oxygenThree,
    '[O III] 4960': oxygenThree / 2.984,
    '[O II] 3730': oxygenRed,
    '[O II] 3727': oxygenBlue,
    '[N II] 6585': nitrogen,
    '[N II] 6550': nitrogen / 2.96,
    '[S II] 6718': sulphurBlue,
    '[S II] 6733': sulphurRed,
    '[O I] 6302': oxygenOne,
    '[O I] 6366': oxygenOne / 3.05,
    '[N I] 5201': random.uniform(0.1, 0.4),
    '[Ne III] 3870': neon,
    '[Ne III] 3969': neon / 3.32,
    '[S III] 9533': random.uniform(0.3, 0.9),
    '[S III] 9071': random.uniform(0.12, 0.36),
  };
}
