import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Random } from '$lib/science/simulate/random';
import { writeSpectrumCsv, writeSpectrumFits, type WritableSpectrum } from '$lib/formats/write-spectrum';

const root = fileURLToPath(new URL('../../../../', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'farglow-measure-'));
const n = 900;

/** White noise of 0.4 from seeded draws of the project's own generator. */
const draws = new Random(17);
const noise = Array.from({ length: n }, () => 0.4 * draws.normal());
/** [O III] and H-beta at a redshift. */
function spectrum(redshift: number): WritableSpectrum {
  const wavelength = Float64Array.from({ length: n }, (_, i) => 5500 + 2 * i);
  const flux = wavelength.map((angstrom, i) => {
    const line = (rest: number, height: number) =>
      height * Math.exp(-0.5 * ((angstrom - rest * (1 + redshift)) / 4) ** 2);
    return 1 + noise[i] + line(4862.68, 3) + line(4960.3, 3) + line(5008.24, 9);
  });
  return {
    name: `z${redshift}`,
    wavelength,
    medium: 'vacuum',
    specsys: 'BARYCENT',
    flux,
    error: new Float64Array(n).fill(0.4),
    fluxUnit: null,
    raDegrees: null,
    decDegrees: null,
    dateObs: null,
    exposureSeconds: null,
    observatoryMetres: null,
  };
}

function run(...args: string[]): Promise<{ status: number; out: string; err: string }> {
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      [join(root, 'docker-free-scripts/run-command.mjs'), 'measure', ...args],
      { cwd: folder },
      (error, out, err) => resolve({ status: error ? Number(error.code) : 0, out, err }),
    );
  });
}

const redshifts = [0.21, 0.23, 0.25, 0.27, 0.29, 0.31];
const names = redshifts.map((_, i) => `s${i}.fits`);

beforeAll(() => {
  names.forEach((name, i) => writeFileSync(join(folder, name), writeSpectrumFits(spectrum(redshifts[i]))));
  writeFileSync(join(folder, 'bad.fits'), 'not a spectrum');
  const bare = writeSpectrumCsv(spectrum(0.25))
    .split('\n')
    .filter((line) => !line.startsWith('#'));
  writeFileSync(join(folder, 'bare.csv'), bare.join('\n').replace('wavelength,flux,error', 'x,y,e'));
  const columns = { wavelength: 'x', wavelengthUnit: 'Angstrom', flux: 'y', error: 'e' };
  const instrument = { name: 'CHO spectrograph', medium: 'vacuum', specsys: 'BARYCENT', resolvingPower: 800, columns };
  writeFileSync(join(folder, 'instrument.json'), JSON.stringify(instrument));
  writeFileSync(join(folder, 'odd.json'), JSON.stringify({ ...instrument, colour: 'green' }));
});
afterAll(() => rmSync(folder, { recursive: true }));

describe('the command measure', { timeout: 120_000 }, () => {
  it('prints the same lines in the order of the files, whatever the number of threads', async () => {
    const one = await run(...names, '--threads', '1');
    expect(one.status).toBe(0);
    const outputs = one.out
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line) as { source: string; name: string });
    expect(outputs.map((output) => output.source)).toEqual(names);
    expect(outputs.map((output) => output.name)).toEqual(redshifts.map((redshift) => `z${redshift}`));
    const three = await run(...names, '--threads', '3');
    expect(three.out).toBe(one.out);
  });

  it('goes on after files that cannot be read, and says so by its exit status', async () => {
    const { status, out, err } = await run('bad.fits', folder, 'missing.fits', names[0]);
    expect(status).toBe(1);
    const outputs = out
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line) as { error?: string });
    expect(outputs.map((output) => output.error !== undefined)).toEqual([true, true, true, false]);
    expect(err).toContain('missing.fits: There is no such file.');
  });

  it('fills from an instrument description what a file lacks', async () => {
    const { status, out } = await run('bare.csv', '--instrument', 'instrument.json');
    expect(status).toBe(0);
    const output = JSON.parse(out) as { flags: string[]; frame: object };
    expect(output.flags).not.toContain('wavelength doubt');
    expect(output.frame).toMatchObject({ medium: 'vacuum', specsys: 'BARYCENT' });
  });

  it('refuses a description that is none, and options it does not know', async () => {
    const odd = await run('bare.csv', '--instrument', 'odd.json');
    expect(odd).toMatchObject({ status: 1, out: '' });
    expect(odd.err).toContain('colour');
    expect(await run('--bogus')).toMatchObject({ status: 1, out: '' });
  });
});
