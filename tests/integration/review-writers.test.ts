import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { Refusal } from '$lib/domain/refusal';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { readQuestion } from '$lib/server/review/read-question';
import { recordRuling } from '$lib/server/review/record-ruling';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { makeInstallation, type Installation } from './installation';
import { first, second } from './release-world';
import { seedSpectra } from './seed-spectra';

const WRITERS = 50;
const SPECTRA = 200;
/** Verdicts of each writer; every fifth is taken back, and every seventh given anew. */
const EACH = 20;

let installation: Installation;
let programme: string;
beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('writers');
});
afterAll(() => installation.destroy());

const people = (n: number, name: string, role: 'scientist' | 'curator') =>
  Promise.all(Array.from({ length: n }, (_, i) => installation.makePerson(`${name} ${i}`, programme, [role])));
const rows = <T extends object>(sql: string) => database().query<T>(sql, { type: QueryTypes.SELECT });

it('50 writers at once on 200 spectra lose no update; a conflict says who and what', async () => {
  const writers = await people(WRITERS, 'Writer', 'scientist');
  const spectra = Array.from({ length: SPECTRA }, (_, i) => ({ name: `S-${i}`, redshift: 0.3, rival: 0.7 }));
  const ids = await seedSpectra(programme, writers[0].userId, spectra);
  /** What each person last said of each spectrum; null where they took it back. */
  const said = new Map<string, number | null>();
  let written = 0;
  async function write(writer: Actor, w: number): Promise<void> {
    for (let i = 0; i < EACH; i++) {
      // Neighbours in time share spectra: a step of 37 walks through all 200, a start of 4 a writer overlaps.
      const id = ids[(4 * w + 37 * i) % SPECTRA];
      const { verdictId } = await recordVerdict(writer, id, (w + i) % 2 ? first : second);
      written++;
      said.set(`${id} ${writer.userId}`, (w + i) % 2 ? 0.3 : 0.7);
      if (i % 5 === 0) {
        await undoVerdict(writer, verdictId);
        written++;
        said.set(`${id} ${writer.userId}`, null);
      } else if (i % 7 === 0) {
        await recordVerdict(writer, id, first);
        written++;
        said.set(`${id} ${writer.userId}`, 0.3);
      }
    }
  }
  await Promise.all(writers.map(write));
  const [{ n }] = await rows<{ n: number }>('SELECT COUNT(*) AS n FROM verdicts');
  expect(Number(n)).toBe(written);
  const standing = await rows<{ spectrumId: string; userId: string; kind: string; redshift: number | null }>(
    `SELECT w.spectrum_id AS spectrumId, w.user_id AS userId, w.kind, w.redshift FROM verdicts w
      WHERE NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = w.id)`,
  );
  expect(new Map(standing.map(({ spectrumId, userId, redshift }) => [`${spectrumId} ${userId}`, redshift]))).toEqual(
    said,
  );

  // Curators rule at once on the same questions: one a question is heard, each of the others is told by whom.
  const curators = await people(10, 'Curator', 'curator');
  const open: string[] = [];
  for (const id of ids.slice(0, 40)) {
    if ((await readQuestion(curators[0], id).catch(() => null))?.standing === 'open') open.push(id);
  }
  expect(open.length).toBeGreaterThan(5);
  const questions = open.slice(0, 6);
  const refusals: Refusal[] = [];
  const rule = async (curator: Actor, id: string) => {
    const seen = (await readQuestion(curator, id)).verdicts.map((verdict) => verdict.id);
    return () => recordRuling(curator, id, { kind: 'no redshift', reason: `So says ${curator.name}.`, seen });
  };
  const rulings = await Promise.all(questions.flatMap((id) => curators.map((curator) => rule(curator, id))));
  await Promise.all(
    rulings.map((give) =>
      give().catch((refusal: unknown) => {
        if (!(refusal instanceof Refusal)) throw refusal;
        refusals.push(refusal);
      }),
    ),
  );
  expect(refusals).toHaveLength(questions.length * (curators.length - 1));
  for (const refusal of refusals) {
    expect(refusal).toMatchObject({
      code: 'conflict',
      what: expect.stringMatching(/^Curator \d ruled at \d\d:\d\d UTC: no redshift\.$/),
    });
  }
  const [{ n: ruled }] = await rows<{ n: number }>('SELECT COUNT(*) AS n FROM rulings');
  expect(Number(ruled)).toBe(questions.length);
});
