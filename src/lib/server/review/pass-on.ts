import type { AssignmentInput } from '$lib/domain/assignment';
import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { appendAssignment, judgesOf } from '../database/queries/assignments';
import { inTransaction } from '../database/in-transaction';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { lockSpectrum } from '../database/queries/verdicts';

/** Hands a spectrum to a scientist of its programme with a note, or takes it back; the newest word holds. */
export async function passOn(
  actor: Actor | null,
  spectrumId: string,
  { person, note }: AssignmentInput,
): Promise<{ to: string | null }> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const { userId } = permit(actor, 'spectrum.assign', spectrum.programmeId);
  const taker = person && (await judgesOf(spectrum.programmeId)).find(({ id }) => id === person);
  if (person && !taker) {
    throw new Refusal(
      'invalid',
      'This person does not judge spectra in this programme.',
      'Choose a scientist of the programme.',
      'person',
    );
  }
  await inTransaction(async (transaction) => {
    await lockSpectrum(spectrumId, transaction);
    await appendAssignment({ spectrumId, userId: person, assignedBy: userId, note }, transaction);
  });
  return { to: taker ? taker.name : null };
}
