import { describe, expect, it } from 'vitest';
import { nameLike } from './name-like';

describe('nameLike', () => {
  it('counts the last digits on, past names that are borne', () => {
    expect(nameLike('HC J0412.6−3120', new Set(['HC J0412.6−3121']), [1, 2])).toBe('HC J0412.6−3122');
    expect(nameLike('field-007b', new Set(), [-1])).toBe('field-006b');
  });

  it('keeps minutes under 60 and the count of digits', () => {
    expect(nameLike('J0412-3159', new Set(), [1, 5, -3])).toBe('J0412-3156');
    expect(nameLike('T-9', new Set(), [1, -4])).toBe('T-5');
  });

  it('finds none where there are no digits, or all are taken', () => {
    expect(nameLike('Vega', new Set(), [1])).toBeNull();
    expect(nameLike('T-1', new Set(['T-2']), [1, -2])).toBeNull();
  });
});
