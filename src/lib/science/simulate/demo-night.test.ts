import { describe, expect, it } from 'vitest';
import { demoNight, positionName } from './demo-night';

describe('positionName', () => {
  it('cuts digits, never rounds', () => {
    expect(positionName(63.1734, -31.3459)).toBe('J0412.6-3120');
    expect(positionName(0, 5.999)).toBe('J0000.0+0559');
    expect(positionName(359.999, -0.01)).toBe('J2359.9-0000');
  });
});

describe('demoNight', { timeout: 60_000 }, () => {
  const night = demoNight();

  it('has 120 spectra of distinct targets in five fields through the night', () => {
    expect(night).toHaveLength(120);
    expect(new Set(night.map((s) => s.name)).size).toBe(120);
    expect(new Set(night.map((s) => s.fileStem)).size).toBe(120);
    expect(new Set(night.map((s) => s.header['DATE-OBS'])).size).toBe(5);
  });

  it('is the same each time, and another for another seed', () => {
    expect(demoNight()[17].flux).toEqual(night[17].flux);
    expect(demoNight(2)[17].flux).not.toEqual(night[17].flux);
  });

  it('is mostly star-forming galaxies, with a bit of everything', () => {
    const count = (name: string) => night.filter((s) => s.truth.class === name).length;
    expect(count('star-forming')).toBe(84);
    for (const name of ['quasar', 'lyman-alpha emitter', 'passive', 'star', 'empty sky', 'two redshifts'])
      expect(count(name)).toBeGreaterThan(1);
    const findable = night.filter((s) => s.truth.detectable);
    expect(findable.length).toBeGreaterThan(80);
  });

  it('stands on an even topocentric axis that its header describes', () => {
    for (const { wavelength, header } of night.slice(0, 10)) {
      const last = Number(header.CRVAL1) + Number(header.CDELT1) * (wavelength.length - 1);
      expect(last).toBeCloseTo(wavelength[wavelength.length - 1], 6);
      expect(wavelength[1000]).toBeCloseTo(Number(header.CRVAL1) + 1000 * Number(header.CDELT1), 6);
      expect(wavelength[0]).toBeGreaterThan(3699);
      expect(wavelength[0]).toBeLessThan(3702);
    }
  });

  it('takes the middle of three exposures and their readouts', () => {
    const { header } = night[0];
    const seconds = (card: string) => Date.parse(`${header[card]}Z`) / 1000;
    expect(seconds('DATE-AVG') - seconds('DATE-OBS')).toBeCloseTo(1410, 3);
    expect(header.XPOSURE).toBe(2700);
  });
});
