import type { ChildProcess } from 'node:child_process';
import { Readable } from 'node:stream';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { earlierDemoFiles, demoFiles } from '$lib/commands/demo/demo-files';
import type { Actor } from '$lib/server/auth/permissions';
import { createNight } from '$lib/server/ingest/create-night';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveFile } from '$lib/server/ingest/receive-file';
import { combineTarget } from '$lib/server/measure/combine-target';
import { listTargets, listTargetsSchema } from '$lib/server/review/list-targets';
import { readRepeats } from '$lib/server/review/read-repeats';
import { readTarget } from '$lib/server/review/read-target';
import { makeInstallation, type Installation } from './installation';
import { startWorker, until } from './worker-process';

let installation: Installation;
let [observer, scientist] = [] as unknown as Actor[];
let worker: (ChildProcess & { gone: Promise<void> }) | undefined;

beforeAll(async () => {
  installation = await makeInstallation();
  const programme = await installation.makeProgramme('combined');
  observer = await installation.makePerson('Ola Server', programme, ['observer']);
  scientist = await installation.makePerson('Sam Scientist', programme, ['scientist']);
  worker = startWorker(installation.env);
});
afterAll(async () => {
  worker?.kill('SIGKILL');
  await worker?.gone;
  await installation.destroy();
});

async function submit(civilDate: string, files: { name: string; bytes: Uint8Array }[]): Promise<string> {
  const { id } = await createNight(observer, { civilDate, notes: '' });
  for (const { name, bytes } of files) await receiveFile(observer, id, { name, stream: Readable.from([bytes]) });
  await until('the end of the night', async () =>
    ((night) => night.done && night.spectra.total > 0)(await readNight(observer, id)),
  );
  return id;
}

describe('a combination', () => {
  it('is measured as a spectrum of its own with smaller errors, linked to its parts, and no repeat', async () => {
    // The stack with its three single exposures, and the same target on the main night.
    const { files } = earlierDemoFiles()[1];
    const stack = files.at(-1)!;
    const stem = stack.name.replace('-stack.fits', '');
    const early = await submit('2026-09-13', files.slice(-4));
    const main = await submit(
      '2026-09-14',
      demoFiles().filter(({ name }) => name === `${stem}.fits`),
    );
    const { targets } = await listTargets(observer, listTargetsSchema.parse({}));
    expect(targets.map(({ spectra, nights }) => [spectra, nights])).toEqual([[5, 2]]);
    const [{ id }] = targets;
    const { parts } = await combineTarget(observer, id);
    // The stack stands for its singles.
    expect(parts).toBe(2);
    await expect(combineTarget(observer, id)).rejects.toMatchObject({ code: 'conflict' });
    const combined = await until('the combination', async () => {
      const { spectra } = await readTarget(scientist, id);
      return spectra.find(({ kind, state }) => kind === 'combination' && state === 'measured');
    });
    const { spectra } = await readTarget(scientist, id);
    const whole = spectra.filter(({ parts: within }) => within.length > 0);
    expect(whole.map(({ kind, parts: within }) => [kind, within.length])).toEqual([
      ['stack', 3],
      ['combination', 2],
    ]);
    const partsOf = spectra.filter(({ id: part }) => combined.parts.includes(part));
    for (const part of partsOf) expect(combined.medianSignalToNoise!).toBeGreaterThan(part.medianSignalToNoise!);
    expect(combined.exposureSeconds).toBe(5400);
    // Neither in a night's counts nor among repeats.
    expect((await readNight(observer, early)).spectra.total).toBe(4);
    expect((await readNight(observer, main)).files.total).toBe(1);
    const { pairs } = await readRepeats(scientist, { programme: 'combined' });
    expect(pairs.flatMap(({ first, second }) => [first.id, second.id])).not.toContain(combined.id);
    expect(pairs.length).toBeLessThanOrEqual(1);
  });

  it('is refused where no two spectra share no photons, and from outside', async () => {
    const other = await installation.makeProgramme('other');
    const stranger = await installation.makePerson('Stray Stranger', other, ['observer', 'scientist']);
    const { targets } = await listTargets(observer, listTargetsSchema.parse({}));
    await expect(combineTarget(stranger, targets[0].id)).rejects.toMatchObject({ code: 'not-found' });
    await submit('2026-09-15', demoFiles().slice(0, 1));
    const alone = (await listTargets(observer, listTargetsSchema.parse({}))).targets.find(
      ({ spectra }) => spectra === 1,
    )!;
    await expect(combineTarget(observer, alone.id)).rejects.toThrow(/no two spectra that share no photons/);
  });
});
