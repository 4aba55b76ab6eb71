import { describe, expect, it } from 'vitest';
import { standingDecision, widestVelocityKms } from './standing-decision';

const verdict = (id: string, redshift: number | null, restores: string | null = null) => ({
  id,
  redshift,
  redshiftError: 1e-5,
  restores,
});

describe('standingDecision', () => {
  it('is open where two verdicts differ, of one mind where they lie within 300 km/s', () => {
    expect(standingDecision([], null)).toBe('unjudged');
    expect(standingDecision([verdict('1', 0.3), verdict('2', 0.3005)], null)).toBe('agreed');
    expect(standingDecision([verdict('1', 0.3), verdict('2', 0.7)], null)).toBe('open');
    expect(standingDecision([verdict('1', null), verdict('2', 0.7)], null)).toBe('open');
    expect(standingDecision([verdict('1', null), verdict('2', null)], null)).toBe('agreed');
  });

  it('is settled by a ruling, whatever was said before it', () => {
    expect(standingDecision([verdict('1', 0.3), verdict('2', 0.7)], verdict('3', 0.5))).toBe('ruled');
    expect(standingDecision([], verdict('3', null))).toBe('ruled');
  });

  it('is opened again by a later verdict that disagrees with the ruling, not by one that agrees', () => {
    const ruling = verdict('3', 0.3);
    expect(standingDecision([verdict('1', 0.3), verdict('4', 0.3001)], ruling)).toBe('ruled');
    expect(standingDecision([verdict('1', 0.3), verdict('4', 0.7)], ruling)).toBe('open');
  });

  it('takes a verdict that an undo brought back as given when it first was', () => {
    expect(standingDecision([verdict('1', 0.3), verdict('5', 0.7, '2')], verdict('3', 0.3))).toBe('ruled');
  });
});

describe('widestVelocityKms', () => {
  it('is c times the difference over one plus the mean, of the two furthest apart', () => {
    expect(widestVelocityKms([verdict('1', 0.5), verdict('2', 0.502), verdict('3', 0.501)])).toBeCloseTo(
      (299792.458 * 0.002) / 1.501,
      6,
    );
    expect(widestVelocityKms([verdict('1', 0.5), verdict('2', null)])).toBeNull();
  });
});
