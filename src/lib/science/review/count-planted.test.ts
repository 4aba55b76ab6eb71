import { expect, it } from 'vitest';
import { countPlanted } from './count-planted';

it('counts what is right within 1,000 km/s, nothing where nothing is, and what was called secure and wrong', () => {
  const secure = { confidence: 'secure' as const };
  const none = { redshift: null, confidence: 'none' as const };
  expect(
    countPlanted([
      { ...secure, redshift: 0.503, truth: 0.5 },
      { ...none, truth: null },
      { ...none, truth: 0.5 },
      { ...secure, redshift: 0.9, truth: 0.5 },
      { confidence: 'probable', redshift: 0.9, truth: null },
    ]),
  ).toMatchObject({ looks: 5, right: 2, secureWrong: 1 });
  expect(countPlanted([])).toEqual({ looks: 0, right: 0, secureWrong: 0, share: null });
});
