import type { Actor } from '$lib/server/auth/permissions';
import { listQueue } from '$lib/server/review/list-queue';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordVerdict } from '$lib/server/review/record-verdict';

/** Looks that both give and agree on, beside the one they differ on. */
const AGREED = 2;

/** Two scientists look at spectra of a night: they agree on a few secure ones, and differ on one with two candidates. */
export async function differ([first, second]: Actor[], nightId: string): Promise<void> {
  const queue = await listQueue(first, { night: nightId, show: 'all' });
  const secure = queue.filter(({ confidence }) => confidence === 'secure').slice(0, AGREED);
  for (const { id } of secure) {
    for (const scientist of [first, second]) {
      const comment = '';
      await recordVerdict(scientist, id, { kind: 'candidate', candidate: 0, confidence: 'secure', flags: [], comment });
    }
  }
  for (const { id } of queue) {
    if (secure.some((entry) => entry.id === id)) continue;
    const { candidates } = (await readSpectrum(first, id)).spectrum.measurement;
    const other = candidates.findIndex(({ redshift }) => Math.abs(redshift - candidates[0].redshift) > 0.01);
    if (other < 0) continue;
    const confidence = 'probable';
    const why = ['The doublet fits better here.', 'I see the line, not the doublet.'];
    await recordVerdict(first, id, { kind: 'candidate', candidate: 0, confidence, flags: [], comment: why[0] });
    await recordVerdict(second, id, { kind: 'candidate', candidate: other, confidence, flags: [], comment: why[1] });
    return;
  }
}
