import { describe, expect, it } from 'vitest';
import { layOutPixels } from './detector-grid';
import { drawQuasar } from './draw-quasar';
import { drawPassive, drawStarForming } from './draw-object';
import { placeObject } from './object-on-pixels';
import { Random } from './random';

const grid = layOutPixels(
  [{ start: 3800, end: 9200, axis: 'linear', resolvingPower: 2000, constantFwhm: true, pixelsPerFwhm: 3 }],
  1,
  1,
);

const meanBetween = (values: Float64Array, from: number, to: number) => {
  const inside = [...values].filter((_, i) => grid.centre[i] > from && grid.centre[i] < to);
  return inside.reduce((sum, value) => sum + value, 0) / inside.length;
};

describe('placeObject', () => {
  it('ties the continuum to the anchor line by its equivalent width', () => {
    const galaxy = drawStarForming(new Random(2), 0.3);
    galaxy.continuum.balmerAbsorptionAngstrom = 0;
    galaxy.continuum.oldFraction = 0;
    const placed = placeObject(galaxy, grid);
    const anchor = placed.lines.find(({ line }) => line.line === galaxy.anchor)!;
    const at = anchor.profile.wavelength;
    const level = meanBetween(placed.continuum, at - 20, at + 20);
    expect(anchor.flux / level / 1.3 / galaxy.equivalentWidthRest).toBeCloseTo(1, 1);
  });

  it('reddens blue lines more than red ones', () => {
    const galaxy = drawStarForming(new Random(3), 0.3);
    const ratio = (excess: number) => {
      const { lines } = placeObject({ ...galaxy, dust: { law: 'cardelli-1989', colourExcess: excess } }, grid);
      const flux = (name: string) => lines.find(({ line }) => line.line === name)!.flux;
      return flux('H-alpha 6565') / flux('H-beta 4863');
    };
    // k(H-beta) - k(H-alpha) = 1.07 for Cardelli et al. (1989), R_V = 3.1
    expect(ratio(0.5) / ratio(0)).toBeCloseTo(Math.pow(10, 0.4 * 1.073 * 0.5), 2);
  });

  it('breaks at 4000 Å and dips at Ca H and K in old starlight', () => {
    const { continuum } = placeObject(drawPassive(new Random(4), 0.4), grid);
    expect(
      meanBetween(continuum, 4050 * 1.4, 4150 * 1.4) / meanBetween(continuum, 3850 * 1.4, 3920 * 1.4),
    ).toBeGreaterThan(1.3);
    expect(meanBetween(continuum, 3930 * 1.4, 3940 * 1.4)).toBeLessThan(
      0.8 * meanBetween(continuum, 4010 * 1.4, 4050 * 1.4),
    );
  });

  it('eats the blue half of a quasar’s broad Lyman-alpha, and all light below the Lyman limit', () => {
    const { lines, continuum } = placeObject(drawQuasar(new Random(5), 3.5), grid);
    const lyman = lines.find(({ line }) => line.line === 'Lyman-alpha 1216')!;
    expect(lyman.profile.coverage).toBeLessThan(0.9);
    expect(lyman.profile.coverage).toBeGreaterThan(0.4);
    expect(meanBetween(continuum, 3850, 911 * 4.5)).toBeLessThan(0.1 * meanBetween(continuum, 1300 * 4.5, 1350 * 4.5));
  });
});
