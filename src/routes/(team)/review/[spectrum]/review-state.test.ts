import { describe, expect, it } from 'vitest';
import type { Candidate, Measurement } from '$lib/domain/measurement';
import type { ReviewSpectrum } from '$lib/domain/review-spectrum';
import { lineByName } from '$lib/science/constants/lines';
import { ReviewState } from './review-state.svelte';

const candidate = (redshift: number): Candidate => ({
  redshift,
  redshiftError: 0.00003,
  probability: 0.5,
  objectClass: 'star-forming',
  fwhmKms: 250,
  reasonsFor: [],
  reasonsAgainst: [],
  lines: [],
});

function stateOf(...redshifts: number[]): ReviewState {
  const measurement = {
    candidates: redshifts.map(candidate),
    confidence: 'secure',
    fluxUnit: null,
  } as unknown as Measurement;
  return new ReviewState({ id: 'a', measurement });
}

/** A spectrum without noise: H-alpha and [O III] at redshift 0.3 over a flat continuum, error 1. */
function pixelsAt(redshift: number): ReviewSpectrum {
  const wavelength = Float64Array.from({ length: 3000 }, (_, i) => 6000 + i);
  const flat = (value: number) => new Float64Array(3000).fill(value);
  const lines = ['H-alpha 6565', '[O III] 5008', '[O III] 4960'].map(
    (name) => lineByName(name).wavelengthVacuum * (1 + redshift),
  );
  const heights = [30, 30, 30 / 2.98];
  const flux = wavelength.map((at) =>
    lines.reduce((sum, centre, k) => sum + heights[k] * Math.exp(-0.5 * ((at - centre) / 3.4) ** 2), 5),
  );
  const arrays = { wavelength, flux, error: flat(1), sky: null, continuum: flat(5), lsfSigma: flat(1.3) };
  return { ...arrays, id: 'a', observerFactor: 1, fluxUnit: null } as unknown as ReviewSpectrum;
}

describe('ReviewState', () => {
  it('starts at the first candidate and without a confidence, whatever the engine said', () => {
    const state = stateOf(0.3, 0.7);
    expect([state.redshift, state.candidate, state.confidence]).toEqual([0.3, 0, null]);
    expect(state.missing('candidate')).toBe('Give a confidence');
  });

  it('asks for the confidence again for another candidate and for a moved redshift', () => {
    const state = stateOf(0.3, 0.7);
    state.confidence = 'secure';
    state.step(1);
    expect([state.redshift, state.confidence]).toEqual([0.7, null]);
    state.confidence = 'probable';
    state.nudge(30);
    expect([state.candidate, state.confidence]).toEqual([null, null]);
    expect(state.redshift).toBeCloseTo(0.7 + (1.7 * 30) / 299_792.458, 10);
  });

  it('keeps the confidence while a moved redshift moves on', () => {
    const state = stateOf(0.3);
    state.nudge(30);
    state.confidence = 'probable';
    state.nudge(30);
    expect(state.confidence).toBe('probable');
  });

  it('goes round the candidates, and back to the first from a moved redshift', () => {
    const state = stateOf(0.3, 0.7);
    state.step(-1);
    expect(state.candidate).toBe(1);
    state.move(2);
    state.step(-1);
    expect(state.candidate).toBe(0);
  });

  it('keeps the redshift in range and passes over what is no number', () => {
    const state = stateOf(0.3);
    state.move(99);
    expect(state.redshift).toBe(7.5);
    state.move(NaN);
    expect(state.redshift).toBe(7.5);
  });

  it('says what each kind of verdict lacks', () => {
    const state = stateOf(0.3);
    expect(state.missing('by hand')).toBe('Move the redshift first');
    state.confidence = 'none';
    expect(state.missing('candidate')).toBe('The word none goes with no redshift');
    expect(state.missing('no redshift')).toBeNull();
    state.flag('other', true);
    expect(state.missing('no redshift')).toContain('comment');
    state.comment = 'ghost of a neighbour';
    expect(state.missing('no redshift')).toBeNull();
    expect(stateOf().missing('candidate')).toBe('There is no candidate to accept');
  });

  it('snaps to the best fit near, which gives the redshift an error', () => {
    const state = stateOf(0.7);
    state.receive(pixelsAt(0.3));
    state.move(0.3 + (1.3 * 250) / 299_792.458);
    expect(state.snappedError).toBeNull();
    state.snap();
    expect(Math.abs(state.redshift - 0.3) / 1.3).toBeLessThan(15 / 299_792.458);
    expect(state.snappedError).toBeGreaterThan(0);
    expect(state.snappedError).toBeLessThan(0.0002);
    expect(state.lines.find(({ line }) => line === 'H-alpha 6565')?.signalToNoise).toBeGreaterThan(20);
  });

  it("takes a candidate whole where snapping ends at the candidate's own redshift", () => {
    const state = stateOf(0.3);
    state.receive(pixelsAt(0.3));
    state.nudge(150);
    state.snap();
    expect([state.candidate, state.redshift]).toEqual([0, 0.3]);
  });

  it('centres on a chosen line, and shows all when it is chosen again', () => {
    const state = stateOf(0.3);
    state.receive(pixelsAt(0.3));
    const whole = state.view;
    state.chooseLine('H-alpha 6565');
    expect((state.view.from + state.view.to) / 2).toBeCloseTo(lineByName('H-alpha 6565').wavelengthVacuum * 1.3, 6);
    state.chooseLine('H-alpha 6565');
    expect([state.view, state.chosenLine]).toEqual([whole, null]);
  });
});
