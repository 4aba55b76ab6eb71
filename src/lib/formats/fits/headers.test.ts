import { describe, expect, it } from 'vitest';
import { readSpectra } from '../read-spectra';
import { readHeader } from './read-header';

/** A header of raw 80-letter cards. */
function rawHeader(cards: string[]): Uint8Array {
  const text = [...cards, 'END'].map((card) => card.padEnd(80)).join('');
  return new TextEncoder().encode(text.padEnd(Math.ceil(text.length / 2880) * 2880));
}

describe('headers', () => {
  it('read free format, exponents with D, quotes, CONTINUE and HIERARCH', () => {
    const header = rawHeader([
      "OBJECT  = 'It''s a name  '     / comment",
      'EXPTIME = 1.5D2',
      'FLAG    =                    T',
      "LONG    = 'first &'",
      "CONTINUE  'second &'",
      "CONTINUE  'third' / end",
      'HIERARCH CHO DET GAIN = 1.75 / e/adu',
      'COMMENT = not a value',
      'EMPTY   =',
      'EXPTIME = 7',
    ]);
    const { cards, end } = readHeader(header, 0, null, { file: 'a.fits' });
    expect(end).toBe(2880);
    expect(cards.text('OBJECT')).toBe("It's a name");
    expect(cards.number('EXPTIME')).toBe(150);
    expect(cards.get('FLAG')).toBe(true);
    expect(cards.text('LONG')).toBe('first second third');
    expect(cards.number('CHO DET GAIN')).toBe(1.75);
    expect(cards.has('EMPTY')).toBe(false);
  });

  it('take time linear in their size where END is missing', () => {
    const endless = new Uint8Array(8 << 20).fill(0x20);
    endless.set(new TextEncoder().encode('SIMPLE  =                    T'));
    const start = performance.now();
    const { problems } = readSpectra(endless, 'a.fits');
    expect(problems[0].code).toBe('fits-header-without-end');
    expect(performance.now() - start).toBeLessThan(2000);
  });
});
