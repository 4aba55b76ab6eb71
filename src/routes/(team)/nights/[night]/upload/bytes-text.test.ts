import { describe, expect, it } from 'vitest';
import { bytesText } from './bytes-text';

describe('bytesText', () => {
  it.each([
    [0, '0 B'],
    [999, '999 B'],
    [1000, '1 kB'],
    [812_345, '812 kB'],
    [999_600, '1.0 MB'],
    [48_123_456, '48.1 MB'],
    [2_560_000_000, '2.6 GB'],
  ])('writes %i as %s', (bytes, text) => {
    expect(bytesText(bytes)).toBe(text);
  });
});
