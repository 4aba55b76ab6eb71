import { describe, expect, it } from 'vitest';
import { exposureNeeded, independentLines } from './exposure-needed';

const line = (name: string, signalToNoise: number) => ({ line: name, signalToNoise });

describe('independentLines', () => {
  it('counts lines of one upper level and unresolved pairs once, by their strongest', () => {
    const lines = [
      line('[O III] 4960', 4),
      line('[O III] 5008', 12),
      line('[O II] 3727', 3),
      line('[O II] 3730', 3.5),
      line('H-beta 4863', 2),
    ];
    expect(independentLines(lines)).toEqual([
      line('[O III] 5008', 12),
      line('[O II] 3730', 3.5),
      line('H-beta 4863', 2),
    ]);
  });
});

describe('exposureNeeded', () => {
  it('takes four times the exposure to double the signal of the second line', () => {
    const lines = [line('H-alpha 6565', 12), line('[S II] 6718', 2)];
    const needed = exposureNeeded({ exposureSeconds: 900, probability: 0.95, lines })!;
    expect(needed).toMatchObject({ factor: 4, extraSeconds: 2700, atLeast: false, limitedBy: 'second line' });
    expect(needed.decisive).toEqual({ line: '[S II] 6718', now: 2, then: 4 });
  });
  it('gives a lower bound where the second line does not show, or none was fitted', () => {
    const faint = [line('H-alpha 6565', 7), line('[S II] 6718', 0.3)];
    expect(exposureNeeded({ exposureSeconds: 100, probability: 0.6, lines: faint })).toMatchObject({
      factor: 16,
      extraSeconds: 1500,
      atLeast: true,
    });
    const lone = exposureNeeded({ exposureSeconds: 100, probability: 0.6, lines: [line('H-alpha 6565', 7)] })!;
    expect(lone.decisive).toEqual({ line: null, now: 0, then: 0 });
    expect(lone.atLeast).toBe(true);
  });
  it('lets the log odds grow with time where two lines are there already', () => {
    const lines = [line('H-alpha 6565', 12), line('[S II] 6718', 5)];
    const needed = exposureNeeded({ exposureSeconds: 1000, probability: 0.95, lines })!;
    // ln(199) / ln(19) = 5.2933 / 2.9444
    expect(needed.factor).toBeCloseTo(1.7977, 4);
    expect(needed).toMatchObject({ limitedBy: 'probability', atLeast: false });
  });
  it('says nothing without lines, below even odds with two lines, and where light is not what lacks', () => {
    const two = [line('H-alpha 6565', 12), line('[S II] 6718', 5)];
    expect(exposureNeeded({ exposureSeconds: 900, probability: 0.92, lines: [] })).toBeNull();
    expect(exposureNeeded({ exposureSeconds: 900, probability: 0.4, lines: two })).toBeNull();
    expect(exposureNeeded({ exposureSeconds: 900, probability: 0.999, lines: two })).toBeNull();
  });
  it('keeps the factor where the present exposure is not known', () => {
    const lines = [line('H-alpha 6565', 12), line('[S II] 6718', 2)];
    expect(exposureNeeded({ exposureSeconds: null, probability: 0.95, lines })).toMatchObject({
      factor: 4,
      extraSeconds: null,
    });
  });
});
