import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, beforeEach, expect, it } from 'vitest';
import type { VerdictInput } from '$lib/domain/verdict';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { statements } from '$lib/server/database/migrations/0008-review-masks';
import { readOwnVerdict } from '$lib/server/review/read-own-verdict';
import { readQuestion } from '$lib/server/review/read-question';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { makeInstallation, type Installation } from './installation';
import { seedNight } from './seed-spectra';

let installation: Installation;
let programmeId: string;
let ines: Actor;
let koji: Actor;
let observer: Actor;
let spectrum: string;

beforeAll(async () => {
  installation = await makeInstallation();
  programmeId = await installation.makeProgramme('masks');
  ines = await installation.makePerson('Ines V', programmeId, ['scientist']);
  koji = await installation.makePerson('Koji B', programmeId, ['scientist']);
  observer = await installation.makePerson('Rua T', programmeId, ['observer']);
});
afterAll(() => installation.destroy());
beforeEach(async () => {
  const { spectrumIds } = await seedNight(programmeId, observer.userId, [
    { name: 'A', ra: 10, dec: -30, redshift: 0.3, rival: 0.7, probability: 0.9, confidence: 'secure' },
  ]);
  [spectrum] = spectrumIds;
});

const masked: VerdictInput = {
  kind: 'candidate',
  candidate: 0,
  confidence: 'probable',
  flags: ['two redshifts'],
  comment: '',
  masks: [{ from: 5570, to: 5585, reason: 'sky residual' }],
  secondRedshift: 0.51234,
  secondRedshiftError: 4e-5,
};
const plain: VerdictInput = { kind: 'no redshift', flags: [], comment: '' };

it('keeps masks and a second redshift with the verdict, for whoever may see it and for nobody else', async () => {
  const { verdictId } = await recordVerdict(ines, spectrum, masked);
  expect(await readOwnVerdict(ines, spectrum)).toEqual({
    text: '0.30000, probable and 0.51234',
    masks: masked.masks,
    secondRedshift: 0.51234,
  });
  expect(await readOwnVerdict(koji, spectrum)).toBeNull();
  await expect(readQuestion(koji, spectrum)).rejects.toMatchObject({ code: 'forbidden' });
  await recordVerdict(koji, spectrum, plain);
  const { details } = await readQuestion(koji, spectrum);
  expect(details).toEqual({
    [verdictId]: { masks: masked.masks, secondRedshift: 0.51234, secondRedshiftError: 4e-5 },
  });
});

it('appends: a later verdict without masks leaves the earlier row, and undo brings its masks back', async () => {
  await recordVerdict(ines, spectrum, masked);
  const { verdictId } = await recordVerdict(ines, spectrum, plain);
  expect(await readOwnVerdict(ines, spectrum)).toMatchObject({ masks: [], secondRedshift: null });
  await undoVerdict(ines, verdictId);
  expect(await readOwnVerdict(ines, spectrum)).toMatchObject({ masks: masked.masks, secondRedshift: 0.51234 });
  const rows = await database().query(
    `SELECT d.verdict_id FROM verdict_details d JOIN verdicts v ON v.id = d.verdict_id
      WHERE v.spectrum_id = :spectrum`,
    { replacements: { spectrum }, type: QueryTypes.SELECT },
  );
  expect(rows).toHaveLength(2);
});

it('has a migration that can be run again', async () => {
  for (const statement of [...statements, ...statements]) await database().query(statement);
});
