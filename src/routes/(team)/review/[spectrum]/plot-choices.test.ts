import { expect, it } from 'vitest';
import { parsePlotChoices } from './plot-choices.svelte';

it('falls back to the usual choices for damaged text and for widths that are not offered', () => {
  const usual = { smoothPixels: 1.5, residuals: false, observatory: false };
  expect(parsePlotChoices(null)).toEqual(usual);
  expect(parsePlotChoices('{')).toEqual(usual);
  expect(parsePlotChoices('{"smoothPixels":99}')).toEqual(usual);
  expect(parsePlotChoices('{"residuals":true}')).toEqual({ ...usual, residuals: true });
});
