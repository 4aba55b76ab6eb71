import { expect, it } from 'vitest';
import { Scratch } from './scratch';

it('gives zeros of the length asked for, whatever was written before', () => {
  const scratch = new Scratch();
  for (const length of [5, 3, 5, 0, 12]) {
    const values = scratch.take(length);
    expect([...values]).toEqual(Array.from({ length }, () => 0));
    values.fill(NaN);
  }
});
