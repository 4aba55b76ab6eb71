import { describe, expect, it } from 'vitest';
import { acceptanceOf } from './acceptance-of';

const at = (redshift: number | null) => ({ redshift, redshiftError: 1e-4 });
const after = (redshift: number | null, isCurrent = false) => ({ ...at(redshift), isCurrent });

describe('acceptanceOf', () => {
  it('takes what nobody has judged, whatever became of the redshift', () => {
    expect(acceptanceOf(after(1.2), 'unjudged', null, false)).toBe('accept');
    expect(acceptanceOf(after(null), 'unjudged', null, false)).toBe('accept');
  });

  it('leaves alone what is current, open, or judged as something else', () => {
    expect(acceptanceOf(after(0.3, true), 'unjudged', null, true)).toBe('current');
    expect(acceptanceOf(after(0.3), 'open', at(0.3), true)).toBe('open');
    expect(acceptanceOf(after(0.3), 'agreed', at(0.9), true)).toBe('otherwise');
    expect(acceptanceOf(after(0.3), 'ruled', at(null), true)).toBe('otherwise');
  });

  it('takes what people agree with, to 300 km/s', () => {
    expect(acceptanceOf(after(0.3), 'agreed', at(0.3005), true)).toBe('accept');
    expect(acceptanceOf(after(null), 'ruled', at(null), true)).toBe('accept');
  });

  it('tells nothing of what others said to those who have not looked', () => {
    for (const decided of [at(0.3), at(0.9)]) {
      expect(acceptanceOf(after(0.3), 'agreed', decided, false)).toBe('unseen');
      expect(acceptanceOf(after(0.3), 'open', decided, false)).toBe('unseen');
    }
  });
});
