import { describe, expect, it } from 'vitest';
import { hourTicks } from './hour-ticks';

const at = (text: string) => Date.parse(`2026-11-15T${text}Z`);
const clock = (ticks: number[]) => ticks.map((time) => new Date(time).toISOString().slice(11, 16));

describe('hourTicks', () => {
  it('stands on whole hours through a night, and on minutes within an hour', () => {
    expect(clock(hourTicks(at('00:24'), at('05:10'), 6))).toEqual(['01:00', '02:00', '03:00', '04:00', '05:00']);
    expect(clock(hourTicks(at('00:24'), at('01:10'), 4))).toEqual(['00:30', '00:45', '01:00']);
  });
  it('gives whole days for a range of weeks and nothing for none', () => {
    expect(hourTicks(at('00:00'), at('00:00') + 20 * 86_400_000, 5)).toHaveLength(6);
    expect(hourTicks(5, 5, 4)).toEqual([]);
  });
});
