import { describe, expect, it } from 'vitest';
import type { Instrument } from '$lib/domain/instrument';
import { checkDescription, readDescription } from './read-description';

function form(fields: Record<string, string>): FormData {
  const data = new FormData();
  for (const [name, value] of Object.entries(fields)) data.append(name, value);
  return data;
}
const read = (fields: Record<string, string>, before: Instrument | null = null) =>
  readDescription(form({ name: 'CH-1', ...fields }), before);

describe('readDescription', () => {
  it('reads what is written and leaves out what is empty', () => {
    expect(read({ medium: 'air', specsys: '', latitude: '-31,27', longitude: '\u221270.81', height: '2380' })).toEqual({
      name: 'CH-1',
      medium: 'air',
      site: { latitudeDegrees: -31.27, longitudeEastDegrees: -70.81, heightMetres: 2380 },
    });
  });

  it('turns OBSGEO-X, -Y, -Z into latitude, longitude and height', () => {
    const { site } = read({ sitePlace: 'xyz', siteX: '-4090053.34', siteY: '2496579.22', siteZ: '-4196270.98' });
    expect(site!.longitudeEastDegrees).toBeCloseTo(148.6, 0);
    expect(() => read({ sitePlace: 'xyz', siteX: '1', siteY: '2', siteZ: '3' })).toThrow(/inside the Earth/);
    expect(() => read({ sitePlace: 'xyz', siteX: '-4090053.34' })).toThrow(/three numbers/);
  });

  it('reads one bad region a line, with its reason', () => {
    expect(read({ badRegions: '7590 7620 hot column\n\n5575-5580' }).badRegionsAngstrom).toEqual([
      [7590, 7620, 'hot column'],
      [5575, 5580],
    ]);
  });

  it.each([
    [{ badRegions: '7590 7620\nhot column' }, 'badRegions'],
    [{ badRegions: '7620 7590' }, 'badRegions'],
    [{ latitude: '95', longitude: '10' }, 'latitude'],
    [{ latitude: 'north', longitude: '10' }, 'latitude'],
    [{ resolution: 'power', resolvingPower: '-5' }, 'resolvingPower'],
    [{ resolution: 'table', resolutionTable: '5000 3' }, 'resolutionTable'],
    [{ name: '' }, 'name'],
  ])('says of %o what is wrong, at its field', (fields, where) => {
    expect(() => read(fields as Record<string, string>)).toThrow(expect.objectContaining({ where }));
  });

  it('keeps what the form does not ask for, and forgets an assignment that is crossed out', () => {
    const assignments = [
      { names: ['a', 'b'], columns: { wavelength: 'a', flux: 'b' } },
      { names: ['c', 'd'], columns: { wavelength: 'c', flux: 'd' } },
    ];
    const before: Instrument = { name: 'CH-1', columns: { lsfSigmaPixels: 'w', flux: 'f' }, assignments };
    const after = read({ name: 'another', 'column-flux': 'g', forget: '0' }, before);
    expect(after).toEqual({ name: 'CH-1', columns: { lsfSigmaPixels: 'w', flux: 'g' }, assignments: [assignments[1]] });
  });
});

describe('checkDescription', () => {
  it('names the key of a JSON description that is not known', () => {
    expect(() => checkDescription({ name: 'CH-1', resolution: 3 })).toThrow(/resolution/);
  });
});
