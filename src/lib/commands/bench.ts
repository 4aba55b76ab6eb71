import { parseArgs } from 'node:util';
import { runAccuracy } from './bench/accuracy';
import { runCalibrate } from './bench/calibrate';
import { runNight } from './bench/night';
import { runReview } from './bench/review';
import { runSpeed } from './bench/speed';

const USAGE = `npm run bench -- accuracy [--count 13000] [--seed 1] [--flavour-count 170] [--threads N]
                          [--sample-night FOLDER] [--out FOLDER]
npm run bench -- speed    [--count 400] [--seed 1]
npm run bench -- night    [--count 5000] [--seed 1]
npm run bench -- review   [--count 50] [--seed 1]
npm run bench -- calibrate [--count 13000] [--seed 1001] [--map FILE]

accuracy  simulates spectra, measures them and prints what came out beside the bar:
          measured figure, count, floor, goal, reached or not.
          --sample-night scores a folder of files with a truth.csv by the same rules.
speed     spectra per second on one core, beside a plain fit by general tools, and memory.
night     sends a night of files of 4,000 pixels to an installation of its own and follows it until the
          last measurement is stored; prints the split by stage, and the ratio to the engine alone.
review    starts an installation of its own and drives Chromium through its review page with spectra
          of 10,000 pixels: key press to next spectrum drawn, one redraw, frames while z is dragged.
calibrate fits the map from raw to calibrated probability on simulated spectra; prints it or
          writes it to --map. Use another seed than the accuracy runs.`;

const USUAL_COUNT: Record<string, number> = { speed: 400, night: 5000, review: 50 };

function whole(text: string | undefined, usual: number, name: string): number {
  const value = text === undefined ? usual : Number(text);
  if (!Number.isInteger(value) || value < 0) throw new Error(`--${name} takes a whole number, not '${text}'.`);
  return value;
}

function parse() {
  const { values, positionals } = parseArgs({
    allowPositionals: true,
    options: {
      count: { type: 'string' },
      seed: { type: 'string' },
      'flavour-count': { type: 'string' },
      threads: { type: 'string' },
      'sample-night': { type: 'string' },
      out: { type: 'string' },
      map: { type: 'string' },
      help: { type: 'boolean' },
    },
  });
  const what = positionals[0];
  if (!values.help && !['accuracy', 'speed', 'night', 'review', 'calibrate'].includes(what))
    throw new Error(`there is no bench '${what ?? ''}'.`);
  return {
    what: values.help ? 'help' : what,
    count: whole(values.count, USUAL_COUNT[what] ?? 13000, 'count'),
    // a map must not be judged on the spectra that it was fitted on
    seed: whole(values.seed, what === 'calibrate' ? 1001 : 1, 'seed'),
    perFlavour: whole(values['flavour-count'], 170, 'flavour-count'),
    threads: values.threads === undefined ? null : whole(values.threads, 1, 'threads'),
    sampleNight: values['sample-night'] ?? null,
    out: values.out ?? 'build/bench',
    map: values.map ?? null,
  };
}

let options: ReturnType<typeof parse> | null = null;
try {
  options = parse();
} catch (error) {
  process.stderr.write(`bench: ${(error as Error).message}\n\n${USAGE}\n`);
  process.exitCode = 1;
}
if (options?.what === 'help') process.stderr.write(`${USAGE}\n`);
else if (options?.what === 'accuracy') await runAccuracy(options);
else if (options?.what === 'speed') await runSpeed(options);
else if (options?.what === 'night') await runNight(options);
else if (options?.what === 'review') await runReview(options);
else if (options?.what === 'calibrate') await runCalibrate(options);
