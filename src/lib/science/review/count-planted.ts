import type { Confidence } from '$lib/domain/confidence';
import { shareWithinThousand } from './verdicts-agree';
import { wilsonInterval, type Share } from './wilson-interval';

/** What was said of a spectrum whose answer is known. */
export interface PlantedAnswer {
  redshift: number | null;
  confidence: Confidence | null;
  /** The known redshift; null where nothing was put in. */
  truth: number | null;
}

/** How many of them are right. */
export interface PlantedCount {
  looks: number;
  right: number;
  /** Called secure and wrong: the worst that can happen. */
  secureWrong: number;
  /** Wilson's 95 % interval of the share that is right. */
  share: Share | null;
}

/** Counts answers on planted spectra: right within 1,000 km/s of the known redshift, or where both say that there is none. */
export function countPlanted(answers: readonly PlantedAnswer[]): PlantedCount {
  const wrong = answers.filter(
    ({ redshift, truth }) =>
      shareWithinThousand([
        [
          { redshift, redshiftError: null },
          { redshift: truth, redshiftError: null },
        ],
      ]) !== 1,
  );
  const [looks, right] = [answers.length, answers.length - wrong.length];
  const secureWrong = wrong.filter(({ confidence }) => confidence === 'secure').length;
  return { looks, right, secureWrong, share: wilsonInterval(right, looks) };
}
