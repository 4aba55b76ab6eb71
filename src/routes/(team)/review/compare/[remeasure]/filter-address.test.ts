import { describe, expect, it } from 'vitest';
import { filterAddress } from './filter-address';

describe('filterAddress', () => {
  it('changes one part, takes another off, and begins at the first page again', () => {
    expect(filterAddress({ change: 'moved', from: 'secure' }, { change: undefined, to: 'none' })).toBe(
      '?from=secure&to=none',
    );
    expect(filterAddress({ leastKms: 0 }, {}, 'abc')).toBe('?leastKms=0&cursor=abc');
    expect(filterAddress({ change: 'moved' }, { change: undefined })).toBe('?');
  });
});
