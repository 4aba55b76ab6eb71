import { describe, expect, it } from 'vitest';
import { expectedLines, isSeen, linesOutside } from './expected-line';

describe('expectedLines', () => {
  const fit = (line: string, wavelengthObserved: number, signalToNoise: number) => ({
    line,
    wavelengthObserved,
    flux: 1,
    fluxError: 1,
    signalToNoise,
  });
  it('joins fits to the list in order of wavelength and leaves strangers out', () => {
    const lines = expectedLines([fit('H-alpha 6565', 8602, 21), fit('[O III] 5008', 6563, 2), fit('nothing 1', 1, 1)]);
    expect(lines.map(({ label, permitted, upperLevel }) => [label, permitted, upperLevel])).toEqual([
      ['[O\u00a0III]\u00a05008', false, null],
      ['Hα\u00a06565', true, 3],
    ]);
    expect(lines.map(isSeen)).toEqual([false, true]);
  });
  it('names the lines that fall outside the range', () => {
    const outside = linesOutside(0, 3800, 9000);
    expect(outside).toContain('Lyα\u00a01216');
    expect(outside).not.toContain('Hα\u00a06565');
  });
});
