import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { readSpectra } from '$lib/formats/read-spectra';
import { writeSpectrumImage } from '$lib/formats/write-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { DEMO_SITE } from '$lib/science/simulate/demo-observe';
import { speedSpectra } from './speed-spectra';

export interface MakeTask {
  folder: string;
  from: number;
  to: number;
  seed: number;
}

/** Writes FITS files of one spectrum of 4,000 pixels each, every one another place on the sky; returns their paths. */
export function makeFiles({ folder, from, to, seed }: MakeTask): string[] {
  const spectra = speedSpectra(to - from, seed * 100_000 + from);
  return spectra.map((spectrum, k) => {
    const name = `night-${String(from + k + 1).padStart(5, '0')}`;
    const bytes = writeSpectrumImage({
      name,
      wavelength: spectrum.wavelength,
      medium: 'vacuum',
      specsys: 'BARYCENT',
      flux: spectrum.flux,
      error: spectrum.variance.map((value) => (Number.isFinite(value) ? Math.sqrt(value) : NaN)),
      fluxUnit: spectrum.fluxUnit,
      sky: spectrum.sky,
      raDegrees: 60 + (from + k) / 200,
      decDegrees: DEMO_SITE.latitudeDegrees,
      dateObs: '2026-09-21T04:00:00',
      exposureSeconds: 900,
      observatoryMetres: null,
    });
    const path = join(folder, `${name}.fits`);
    writeFileSync(path, bytes);
    return path;
  });
}

export interface AloneTask {
  paths: string[];
  /** Measured first and not counted: the compiler is at work meanwhile. */
  warmUp: number;
  threads: number;
  /** One counter, of the threads that are ready: all begin at once. */
  ready: SharedArrayBuffer;
}

export interface AloneResult {
  /** Clock and processor time of the process, ms, as this thread began and ended. */
  began: { clock: number; processor: number };
  ended: { clock: number; processor: number };
}

function now(): { clock: number; processor: number } {
  const { user, system } = process.cpuUsage();
  return { clock: performance.timeOrigin + performance.now(), processor: (user + system) / 1000 };
}

/** The engine and nothing else: files are read before, then measured on every thread at once. */
export function engineAlone({ paths, warmUp, threads, ready }: AloneTask): AloneResult {
  const spectra = paths.map((path) => toSpectrum(readSpectra(readFileSync(path), path).spectra[0]));
  for (const spectrum of spectra.slice(0, warmUp)) measureSpectrum(spectrum);
  const counter = new Int32Array(ready);
  Atomics.add(counter, 0, 1);
  Atomics.notify(counter, 0);
  for (let count = Atomics.load(counter, 0); count < threads; count = Atomics.load(counter, 0)) {
    Atomics.wait(counter, 0, count);
  }
  const began = now();
  for (const spectrum of spectra) measureSpectrum(spectrum);
  return { began, ended: now() };
}
