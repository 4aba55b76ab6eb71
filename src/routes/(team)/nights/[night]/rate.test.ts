import { describe, expect, it } from 'vitest';
import { Rate } from './rate';

describe('Rate', () => {
  it('gives counts a second and the seconds left', () => {
    const rate = new Rate();
    for (let at = 0; at <= 4000; at += 500) rate.mark(at / 50, at);
    expect(rate.perSecond(4000)).toBeCloseTo(20, 9);
    expect(rate.secondsLeft(100, 4000)).toBeCloseTo(5, 9);
  });
  it('forgets what lies before its window', () => {
    const rate = new Rate(2000);
    for (let at = 0; at <= 10_000; at += 500) rate.mark(at < 5000 ? 0 : (at - 5000) / 10, at);
    expect(rate.perSecond(10_000)).toBeCloseTo(100, 0);
  });
  it('says nothing before enough time has passed, nor after a standstill', () => {
    const rate = new Rate(2000);
    rate.mark(0, 0);
    rate.mark(5, 300);
    expect(rate.perSecond(300)).toBeNull();
    rate.mark(10, 1000);
    expect(rate.perSecond(1000)).toBeCloseTo(10, 9);
    expect(rate.perSecond(3500)).toBeNull();
  });
  it('starts afresh when the count falls', () => {
    const rate = new Rate();
    rate.mark(900, 0);
    rate.mark(1000, 1000);
    rate.mark(0, 2000);
    rate.mark(10, 3000);
    expect(rate.perSecond(3000)).toBeCloseTo(10, 9);
  });
  it('merges events that come too fast to matter', () => {
    const rate = new Rate();
    for (let at = 0; at <= 2000; at += 10) rate.mark(at, at);
    expect(rate.perSecond(2000)).toBeCloseTo(1000, 6);
  });
});
