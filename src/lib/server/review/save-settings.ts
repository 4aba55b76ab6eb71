import { z } from 'zod';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { reviewSettings, storeReviewSettings } from '../database/queries/review-settings';

export const MOST_HIDDEN_PERCENT = 50;
export const MOST_PLANTED_PERCENT = 20;

const percent = (most: number) =>
  z.coerce
    .number('give a number of percent')
    .min(0, 'a share is 0 % or more')
    .max(most, `at most ${most} % make sense here`);

export const settingsSchema = z.object({
  programme: z.uuid('name a programme'),
  looks: z.coerce.number().int().min(1, 'one look or two').max(2, 'one look or two'),
  hiddenPercent: percent(MOST_HIDDEN_PERCENT),
  plantedPercent: percent(MOST_PLANTED_PERCENT),
});

/** Sets how a programme reviews. What was given before stays as it was given. */
export async function saveSettings(actor: Actor | null, input: z.output<typeof settingsSchema>): Promise<void> {
  const { programme: programmeId, looks, hiddenPercent, plantedPercent } = input;
  const { userId } = permit(actor, 'review.set', programmeId);
  const before = (await reviewSettings([programmeId])).get(programmeId)!;
  const [hiddenShare, plantedRate] = [hiddenPercent / 100, plantedPercent / 100];
  await inTransaction(async (transaction) => {
    await storeReviewSettings({ programmeId, looks, hiddenShare, plantedRate }, userId, transaction);
    const after = { looks, hiddenShare, plantedRate };
    const { looks: looksBefore, hiddenShare: hiddenBefore, plantedRate: plantedBefore } = before;
    const detail = {
      before: { looks: looksBefore, hiddenShare: hiddenBefore, plantedRate: plantedBefore },
      after,
    };
    await recordEvent({ userId, action: 'review.set', subject: `programme:${programmeId}`, detail }, transaction);
  });
}
