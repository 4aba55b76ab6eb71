import { describe, expect, it } from 'vitest';
import { previewText } from './change-text';

describe('previewText', () => {
  it('counts what would be accepted and what is left alone, and why', () => {
    const leave = { current: 0, open: 4, otherwise: 0, unseen: 0 };
    expect(previewText({ accept: 132, leave })).toBe('Would accept 132 spectra; leaves 4 with open questions alone.');
    expect(previewText({ accept: 1, leave: { ...leave, open: 0 } })).toBe('Would accept 1 spectrum.');
    expect(previewText({ accept: 0, leave: { current: 1200, open: 0, otherwise: 2, unseen: 3 } })).toBe(
      'Would accept 0 spectra; leaves 2 that people judged otherwise, 3 that others have judged and you have not, 1,200 accepted already alone.',
    );
  });
});
