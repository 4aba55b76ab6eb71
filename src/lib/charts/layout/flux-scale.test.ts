import { describe, expect, it } from 'vitest';
import { fluxScale } from './flux-scale';

const array = (...values: number[]) => Float64Array.from(values);

describe('fluxScale', () => {
  it('ignores a spike under a sky line but not one in the clear', () => {
    const values = new Float64Array(200).fill(1);
    values[50] = 40;
    const under = fluxScale(values, (i) => i !== 50);
    const clear = fluxScale(values, () => true);
    expect(under.top).toBeLessThan(2);
    expect(clear.top).toBeGreaterThan(40);
  });
  it('keeps zero in sight, below and above', () => {
    expect(fluxScale(new Float64Array(50).fill(7), () => true).bottom).toBeLessThan(0);
    expect(fluxScale(new Float64Array(50).fill(-7), () => true).top).toBeGreaterThan(0);
  });
  it('is 0 to 1 without data', () => {
    expect(fluxScale(array(NaN), () => true)).toEqual({ bottom: 0, top: 1 });
  });
});
