import { expect, it } from 'vitest';
import { parseStatus } from './processor-times';

it('reads parent and processor time past a name with blanks and brackets', () => {
  const before = '4242 (a (b) c) S 77 4242 4242 0 -1 4194560 9000 0 0 0';
  expect(parseStatus(`${before} 250 31 0 0 20 0 12 0 5000`)).toEqual({ parent: 77, milliseconds: 2810 });
});
