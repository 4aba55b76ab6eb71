// Source: astropy 5.2.1 (general astronomy library), values and the script that made them in data/observability.
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { airmass } from '$lib/science/derive/airmass';
import { darkHours } from '$lib/science/derive/dark-hours';
import { hoursAbove } from '$lib/science/derive/hours-above';

interface Case {
  civilDate: string;
  site: { latitudeDegrees: number; longitudeEastDegrees: number; heightMetres: number };
  target: { raDegrees: number; decDegrees: number };
  dusk: string;
  dawn: string;
  above: [string, string][];
  airmass: { at: string; airmass: number }[];
}
const { cases } = JSON.parse(readFileSync('tests/reference/data/observability/cases.json', 'utf8')) as {
  cases: Case[];
};

/** What is left out: aberration (20 arcsec) and UT1 - UTC (0.2 s then); both move a crossing by seconds. */
const SECONDS = 10;

describe.each(cases)('the night of $civilDate', ({ civilDate, site, target, dusk, dawn, above, airmass: values }) => {
  it('has the dark hours that astropy finds', () => {
    const { fromMs, untilMs } = darkHours(civilDate, site)!;
    expect(Math.abs(fromMs - Date.parse(dusk))).toBeLessThan(SECONDS * 1000);
    expect(Math.abs(untilMs - Date.parse(dawn))).toBeLessThan(SECONDS * 1000);
  });

  it('has its target at an airmass of 2 or less when astropy has', () => {
    const spans = hoursAbove(target, site, darkHours(civilDate, site)!, 2);
    expect(spans).toHaveLength(above.length);
    spans.forEach(({ fromMs, untilMs }, i) => {
      expect(Math.abs(fromMs - Date.parse(above[i][0]))).toBeLessThan(SECONDS * 1000);
      expect(Math.abs(untilMs - Date.parse(above[i][1]))).toBeLessThan(SECONDS * 1000);
    });
  });

  it('has the airmass that astropy gives, to a thousandth', () => {
    expect(values.length).toBeGreaterThan(1);
    for (const { at, airmass: expected } of values) {
      expect(Math.abs(airmass(target, site, Date.parse(at)) / expected - 1)).toBeLessThan(0.001);
    }
  });
});
