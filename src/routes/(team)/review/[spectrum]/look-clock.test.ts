import { describe, expect, it } from 'vitest';
import { LookClock } from './look-clock';

describe('LookClock', () => {
  it('runs from when the spectrum is drawn', () => {
    const clock = new LookClock();
    clock.touch(500);
    expect(clock.seconds(1000)).toBeNull();
    clock.begin(2000, true);
    clock.begin(9000, true);
    clock.touch(5000);
    expect(clock.seconds(10_000)).toBe(8);
  });

  it('stands still while the page is hidden', () => {
    const clock = new LookClock();
    clock.begin(0, true);
    clock.turn(4000, false);
    clock.touch(50_000);
    clock.turn(100_000, true);
    expect(clock.seconds(101_000)).toBe(5);
  });

  it('begins hidden where the spectrum is drawn behind another page', () => {
    const clock = new LookClock();
    clock.begin(0, false);
    clock.turn(30_000, true);
    expect(clock.seconds(33_000)).toBe(3);
  });

  it('counts a minute of a pause without a touch, and at most 15 minutes', () => {
    const clock = new LookClock();
    clock.begin(0, true);
    clock.touch(10_000);
    expect(clock.seconds(3_600_000)).toBe(70);
    for (let at = 3_600_000; at < 7_200_000; at += 20_000) clock.touch(at);
    expect(clock.seconds(7_200_000)).toBe(900);
  });
});
