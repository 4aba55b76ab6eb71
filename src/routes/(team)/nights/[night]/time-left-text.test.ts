import { describe, expect, it } from 'vitest';
import { timeLeftText } from './time-left-text';

describe('timeLeftText', () => {
  it.each([
    [0, '1 s'],
    [6.2, '7 s'],
    [60, '1 min'],
    [200, '3 min 20 s'],
    [599.5, '10 min'],
    [1500, '25 min'],
    [3600, '1 h'],
    [4321, '1 h 13 min'],
  ])('writes %d seconds as %s', (seconds, text) => {
    expect(timeLeftText(seconds)).toBe(text);
  });
});
