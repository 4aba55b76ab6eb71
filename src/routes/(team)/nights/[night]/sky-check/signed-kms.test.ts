import { describe, expect, it } from 'vitest';
import { signedKms } from './signed-kms';

describe('signedKms', () => {
  it.each([
    [1.234, 0.31, '+1.2 ± 0.3'],
    [-1.234, null, '\u22121.2'],
    [0.01, null, '0.0'],
    [3, null, '+3.0'],
    [-0.0750470169, 3e-12, '\u22120.08 ± under 0.01'],
    [1e-13, 1e-12, '0.00 ± under 0.01'],
  ])('writes %d with error %s as %s', (kms, error, text) => {
    expect(signedKms(kms, error)).toBe(text);
  });
});
