import { describe, expect, it } from 'vitest';
import { foldName } from './target-name';

describe('foldName', () => {
  it('takes spellings of one name for one', () => {
    const spellings = ['J0412.6−3120', 'j0412.6-3120', 'J 0412.6-3120', ' J0412.6_-3120 ', 'Ｊ0412.6‐3120'];
    expect(new Set(spellings.map(foldName))).toEqual(new Set(['j0412.6-3120']));
  });

  it('keeps names apart that differ in sign or number', () => {
    expect(foldName('J0412.6+3120')).not.toBe(foldName('J0412.6-3120'));
    expect(foldName('field 1 object 12')).not.toBe(foldName('field 11 object 2') + 'x');
    expect(foldName('Abell 1')).not.toBe(foldName('Abell 11'));
  });
});
