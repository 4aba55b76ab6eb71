import { describe, expect, it } from 'vitest';
import { expectedCalibrationError, reliabilityBins, reliabilitySvg } from './reliability';

const forecasts = (probability: number, right: number, wrong: number) => [
  ...Array.from({ length: right }, () => ({ probability, cameTrue: true })),
  ...Array.from({ length: wrong }, () => ({ probability, cameTrue: false })),
];

describe('reliability', () => {
  it('is without error where stated and observed shares agree', () => {
    expect(expectedCalibrationError([...forecasts(0.25, 1, 3), ...forecasts(0.75, 3, 1)])).toBeCloseTo(0, 12);
  });

  it('weighs each bin by its count', () => {
    // 10 at 0.95 of which 5 right (off by 0.45), 30 at 0.05 of which none right (off by 0.05)
    const mixed = [...forecasts(0.95, 5, 5), ...forecasts(0.05, 0, 30)];
    expect(expectedCalibrationError(mixed)).toBeCloseTo((10 * 0.45 + 30 * 0.05) / 40, 12);
  });

  it('puts certainty into the last bin and bounds into the upper one', () => {
    const bins = reliabilityBins([...forecasts(1, 2, 0), ...forecasts(0.995, 1, 0), ...forecasts(0.99, 1, 0)]);
    expect(bins.map((b) => [b.from, b.count])).toEqual([
      [0.99, 1],
      [0.995, 3],
    ]);
  });

  it('is NaN without forecasts', () => {
    expect(expectedCalibrationError([])).toBeNaN();
  });

  it('draws one dot a bin', () => {
    const svg = reliabilitySvg(reliabilityBins(forecasts(0.25, 1, 3)), 'test');
    expect(svg.match(/<circle/g)).toHaveLength(1);
    expect(svg).toContain('4 stated 0.250, came true 0.250');
  });
});
