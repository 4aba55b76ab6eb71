import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { levenbergMarquardt } from '../../src/lib/science/measure/fit/levenberg-marquardt';

interface Dataset {
  file: string;
  nObservations: number;
  residualSumOfSquares: number;
  start1: number[];
  start2: number[];
  certified: number[];
  certifiedStdDev: number[];
}

const folder = new URL('./data/nist-strd/', import.meta.url);
const { datasets } = JSON.parse(readFileSync(new URL('certified.json', folder), 'utf8')) as {
  datasets: Record<string, Dataset>;
};

type Model = (b: ArrayLike<number>, x: number[]) => number;
const { exp, cos, sin, atan, PI } = Math;
const gauss: Model = (b, [x]) =>
  b[0] * exp(-b[1] * x) + b[2] * exp(-(((x - b[3]) / b[4]) ** 2)) + b[5] * exp(-(((x - b[6]) / b[7]) ** 2));
const lanczos: Model = (b, [x]) => b[0] * exp(-b[1] * x) + b[2] * exp(-b[3] * x) + b[4] * exp(-b[5] * x);
const chwirut: Model = (b, [x]) => exp(-b[0] * x) / (b[1] + b[2] * x);
const cubics: Model = (b, [x]) =>
  (b[0] + b[1] * x + b[2] * x ** 2 + b[3] * x ** 3) / (1 + b[4] * x + b[5] * x ** 2 + b[6] * x ** 3);

const MODELS: Record<string, Model> = {
  Bennett5: (b, [x]) => b[0] * (b[1] + x) ** (-1 / b[2]),
  BoxBOD: (b, [x]) => b[0] * (1 - exp(-b[1] * x)),
  Chwirut1: chwirut,
  Chwirut2: chwirut,
  DanWood: (b, [x]) => b[0] * x ** b[1],
  ENSO: (b, [x]) =>
    b[0] +
    b[1] * cos((2 * PI * x) / 12) +
    b[2] * sin((2 * PI * x) / 12) +
    b[4] * cos((2 * PI * x) / b[3]) +
    b[5] * sin((2 * PI * x) / b[3]) +
    b[7] * cos((2 * PI * x) / b[6]) +
    b[8] * sin((2 * PI * x) / b[6]),
  Eckerle4: (b, [x]) => (b[0] / b[1]) * exp(-0.5 * ((x - b[2]) / b[1]) ** 2),
  Gauss1: gauss,
  Gauss2: gauss,
  Gauss3: gauss,
  Hahn1: cubics,
  Kirby2: (b, [x]) => (b[0] + b[1] * x + b[2] * x ** 2) / (1 + b[3] * x + b[4] * x ** 2),
  Lanczos1: lanczos,
  Lanczos2: lanczos,
  Lanczos3: lanczos,
  MGH09: (b, [x]) => (b[0] * (x ** 2 + x * b[1])) / (x ** 2 + x * b[2] + b[3]),
  MGH10: (b, [x]) => b[0] * exp(b[1] / (x + b[2])),
  MGH17: (b, [x]) => b[0] + b[1] * exp(-x * b[3]) + b[2] * exp(-x * b[4]),
  Misra1a: (b, [x]) => b[0] * (1 - exp(-b[1] * x)),
  Misra1b: (b, [x]) => b[0] * (1 - (1 + (b[1] * x) / 2) ** -2),
  Misra1c: (b, [x]) => b[0] * (1 - (1 + 2 * b[1] * x) ** -0.5),
  Misra1d: (b, [x]) => (b[0] * b[1] * x) / (1 + b[1] * x),
  // The response of Nelson is the logarithm of the observation.
  Nelson: (b, [x1, x2]) => b[0] - b[1] * x1 * exp(-b[2] * x2),
  Rat42: (b, [x]) => b[0] / (1 + exp(b[1] - b[2] * x)),
  Rat43: (b, [x]) => b[0] / (1 + exp(b[1] - b[2] * x)) ** (1 / b[3]),
  Roszman1: (b, [x]) => b[0] - b[1] * x - atan(b[2] / (x - b[3])) / PI,
  Thurber: cubics,
};

/** Digits attainable in double precision: 6 for most; 5 where the problem itself loses more. */
const DIGITS: Record<string, number> = { Lanczos2: 5, Lanczos3: 5, ENSO: 5, Bennett5: 5 };

function rows(dataset: Dataset): number[][] {
  const lines = readFileSync(new URL(dataset.file, folder), 'utf8').split(/\r?\n/);
  return lines
    .slice(60)
    .map((line) => line.trim().split(/\s+/).map(Number))
    .filter((row) => row.length >= 2 && row.every(Number.isFinite));
}

const digits = (value: number, certified: number) => -Math.log10(Math.abs(value / certified - 1) || 1e-16);

describe('Levenberg-Marquardt against NIST StRD nonlinear regression', () => {
  for (const [name, dataset] of Object.entries(datasets)) {
    for (const start of ['start1', 'start2'] as const) {
      it(`${name} from ${start} reaches the certified values`, () => {
        const data = rows(dataset);
        expect(data.length).toBe(dataset.nObservations);
        const model = MODELS[name];
        const response = (row: number[]) => (name === 'Nelson' ? Math.log(row[0]) : row[0]);
        const result = levenbergMarquardt(
          (b, residuals) => data.forEach((row, i) => (residuals[i] = response(row) - model(b, row.slice(1)))),
          dataset[start],
          data.length,
          // MGH10 crawls along a curved valley from its far start.
          { maximumSteps: 200_000 },
        );
        const needed = DIGITS[name] ?? 6;
        for (let k = 0; k < dataset.certified.length; k++) {
          expect(digits(result.parameters[k], dataset.certified[k]), `parameter ${k + 1}`).toBeGreaterThan(needed);
        }
        // Lanczos1 was made without noise: its residuals are rounding, and so would be errors scaled by them.
        if (name === 'Lanczos1') return;
        for (let k = 0; k < dataset.certified.length; k++) {
          expect(digits(result.standardErrors[k], dataset.certifiedStdDev[k]), `error ${k + 1}`).toBeGreaterThan(3.5);
        }
        expect(digits(result.sumOfSquares, dataset.residualSumOfSquares)).toBeGreaterThan(6);
      });
    }
  }
});
