import { describe, expect, it } from 'vitest';
import { coefficientText, lookTimeText, shareText } from './figure-text';

describe('figures in words', () => {
  it('say what is not known', () => {
    expect([coefficientText(null), shareText(null), lookTimeText(null)]).toEqual(new Array(3).fill('not known'));
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
