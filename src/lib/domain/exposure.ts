/** What tells whether two spectra of one target hold the same photons. Times in milliseconds of Unix time, UTC. */
export interface Exposure {
  id: string;
  /** In the order of submission. */
  fileId: string;
  /** Same for reductions of one exposure: instrument, start to the second, exposure time; null where not known. */
  key: string | null;
  instrument: string;
  startMs: number;
  endMs: number;
  exposureSeconds: number | null;
  /** Ångström. */
  wavelengthMin: number;
  wavelengthMax: number;
}

/** Share of the shorter wavelength range that two reductions of one exposure have in common at least: arms have less. */
const SAME_ARM_SHARE = 0.5;
/** A stack is exposed longer than each of its parts by this factor at least. */
const STACK_FACTOR = 1.5;
/** Share of a part's time that lies within the stack's at least; clocks of headers are cut to seconds. */
const WITHIN_SHARE = 0.9;

function overlapShare(aLow: number, aHigh: number, bLow: number, bHigh: number): number {
  const shorter = Math.min(aHigh - aLow, bHigh - bLow);
  return shorter > 0 ? (Math.min(aHigh, bHigh) - Math.max(aLow, bLow)) / shorter : 0;
}

const inOneArm = (a: Exposure, b: Exposure) =>
  overlapShare(a.wavelengthMin, a.wavelengthMax, b.wavelengthMin, b.wavelengthMax) >= SAME_ARM_SHARE;

/**
 * Of exposures of one target, those that a newer reduction replaces, with the newest that does: another file, submitted
 * later, of the same exposure and arm. Rows of one file never replace each other: they are other fibres.
 */
export function newerReductions(exposures: readonly Exposure[]): Map<string, string> {
  const replaced = new Map<string, string>();
  const byKey = new Map<string, Exposure[]>();
  for (const exposure of exposures) {
    if (exposure.key === null) continue;
    const same = byKey.get(exposure.key);
    if (same) same.push(exposure);
    else byKey.set(exposure.key, [exposure]);
  }
  for (const same of byKey.values()) {
    same.sort((a, b) => (a.fileId < b.fileId ? 1 : a.fileId > b.fileId ? -1 : 0));
    for (const old of same) {
      const newest = same.find((other) => other.fileId <= old.fileId || inOneArm(old, other));
      if (newest && newest.fileId > old.fileId) replaced.set(old.id, newest.id);
    }
  }
  return replaced;
}

/**
 * Of exposures of one target, stacks with the single exposures in them: one instrument and arm, the single's time within
 * the stack's, the stack exposed at least half as long again. The reverse of it cannot be told from headers: a single
 * that was left out of a stack between others counts as in it, so that photons are rather thought shared than counted
 * twice.
 */
export function stacksAndParts(exposures: readonly Exposure[]): { whole: string; part: string }[] {
  const pairs: { whole: string; part: string }[] = [];
  const seconds = exposures.flatMap(({ exposureSeconds }) => (exposureSeconds === null ? [] : [exposureSeconds]));
  const shortest = seconds.reduce((least, value) => Math.min(least, value), Infinity);
  for (const whole of exposures) {
    // Where a star was taken a thousand times alike, nothing is compared.
    if (whole.exposureSeconds === null || whole.exposureSeconds < STACK_FACTOR * shortest) continue;
    for (const part of exposures) {
      if (whole.id === part.id || whole.instrument !== part.instrument || !inOneArm(whole, part)) continue;
      if (whole.exposureSeconds === null || part.exposureSeconds === null) continue;
      if (whole.exposureSeconds < STACK_FACTOR * part.exposureSeconds) continue;
      if (overlapShare(whole.startMs, whole.endMs, part.startMs, part.endMs) < WITHIN_SHARE) continue;
      if (part.endMs - part.startMs <= whole.endMs - whole.startMs) pairs.push({ whole: whole.id, part: part.id });
    }
  }
  return pairs;
}
