/** What the command line asks for. */
export interface MeasureArguments {
  files: string[];
  instrumentFile: string | null;
  explain: boolean;
  /** Threads to fit on; null for one a core. */
  threads: number | null;
}

/** How the command is called. */
export const USAGE = `Usage: npm run --silent measure -- FILE… [--instrument FILE] [--explain] [--threads N]

Prints one JSON object per spectrum, one a line, in the order of the files; an object with "error" stands for what
could not be read. Problems go to standard error. Exit status 0 if every file was read, 1 otherwise.

  --instrument FILE  instrument description (JSON) that supplies what headers lack
  --explain          says on standard error, in plain words, why each redshift was chosen
  --threads N        threads to fit on (default: one a core); the objects are the same for any N`;

/**
 * Parses the arguments of `measure`; everything after `--` is a file.
 *
 * @throws Error with a sentence for the person where an option is unknown or lacks its value.
 */
export function parseArguments(argv: string[]): MeasureArguments {
  const parsed: MeasureArguments = { files: [], instrumentFile: null, explain: false, threads: null };
  for (let i = 0; i < argv.length; i++) {
    const argument = argv[i];
    const value = () => {
      const next = argv[++i];
      if (next === undefined) throw new Error(`${argument} needs a value.`);
      return next;
    };
    if (argument === '--') {
      parsed.files.push(...argv.slice(i + 1));
      break;
    }
    if (argument === '--instrument') parsed.instrumentFile = value();
    else if (argument === '--explain') parsed.explain = true;
    else if (argument === '--threads') {
      parsed.threads = Number(value());
      if (!Number.isInteger(parsed.threads) || parsed.threads < 1 || parsed.threads > 256) {
        throw new Error('--threads needs a whole number from 1 to 256.');
      }
    } else if (argument.startsWith('--')) throw new Error(`Unknown option ${argument}.`);
    else parsed.files.push(argument);
  }
  if (parsed.files.length === 0) throw new Error('No file was named.');
  return parsed;
}
