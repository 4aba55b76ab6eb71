import { afterAll, beforeAll, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { inTransaction } from '$lib/server/database/in-transaction';
import { storeReviewSettings } from '$lib/server/database/queries/review-settings';
import { listBeside } from '$lib/server/review/list-beside';
import { makeInstallation, type Installation } from './installation';
import { seedNight } from './seed-spectra';

let installation: Installation;
let programmeId: string;
let ines: Actor;
let observer: Actor;
let stranger: Actor;
let spectra: string[];

beforeAll(async () => {
  installation = await makeInstallation();
  programmeId = await installation.makeProgramme('beside');
  ines = await installation.makePerson('Ines V', programmeId, ['scientist']);
  observer = await installation.makePerson('Rua T', programmeId, ['observer']);
  stranger = await installation.makePerson('Far Away', await installation.makeProgramme('elsewhere'), ['scientist']);
  const { spectrumIds } = await seedNight(programmeId, observer.userId, [
    { name: 'A', ra: 10, dec: -30, exposureSeconds: 900 },
    { name: 'A', ra: 10, dec: -30, exposureSeconds: 1200 },
    { name: 'B', ra: 11, dec: -30 },
  ]);
  spectra = spectrumIds;
});
afterAll(() => installation.destroy());

it('names the other spectra of the target and no spectrum of another', async () => {
  const beside = await listBeside(ines, spectra[0]);
  expect(beside).toEqual([{ id: spectra[1], label: expect.stringMatching(/^exposure of \d{4}-\d\d-\d\d, 1200 s$/) }]);
  expect(await listBeside(ines, spectra[2])).toEqual([]);
});

it('is for members only', async () => {
  await expect(listBeside(stranger, spectra[0])).rejects.toMatchObject({ code: 'not-found' });
  await expect(listBeside(null, spectra[0])).rejects.toMatchObject({ code: 'not-signed-in' });
});

it('shows none while the look is without the engine’s answer, since their pixels come with theirs', async () => {
  const settings = { programmeId, looks: 1, hiddenShare: 1, plantedRate: 0 };
  await inTransaction((transaction) => storeReviewSettings(settings, ines.userId, transaction));
  expect(await listBeside(ines, spectra[0])).toEqual([]);
});
