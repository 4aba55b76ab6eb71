import { describe, expect, it } from 'vitest';
import { coefficientText, differenceText, lookTimeText, ofText, rangeText, shareText } from './figure-text';

describe('figures in words', () => {
  it('say what is not known', () => {
    expect([coefficientText(null), shareText(null), lookTimeText(null)]).toEqual(new Array(3).fill('not known'));
  });
  it('give ranges in whole percents, with a true minus', () => {
    expect(ofText(37, 40)).toBe('37 of 40');
    expect([rangeText({ low: 0.798, high: 0.974 }), rangeText(null)]).toEqual(['(80 to 97 %)', '']);
    expect(differenceText({ difference: 0.12, low: -0.031, high: 0.27 })).toBe('12 % (\u22123 to 27 %)');
  });
  it('stop where they mean nothing more', () => {
    expect([coefficientText(-0.123), shareText(0.926), lookTimeText(8.44), lookTimeText(125.2)]).toEqual([
      '\u22120.12',
      '93 %',
      '8.4 s',
      '2 min 05 s',
    ]);
  });
});
