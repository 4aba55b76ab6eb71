import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { ROLES, type Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { inTransaction } from '../database/in-transaction';
import { findProgramme } from '../database/queries/nights';
import { insertMembership, insertProgramme } from '../database/queries/new-programme';

export const foundProgrammeSchema = z.object({
  name: z.string().trim().min(3, 'write a name').max(200),
  slug: z
    .string()
    .trim()
    .min(2)
    .max(60)
    .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'write small letters, digits and single hyphens'),
});

/**
 * Founds a programme. For administrators, whose account by itself sees nothing unreleased: whoever founds becomes the
 * first member, with the roles that submit, settle and publish, and invites the others.
 */
export async function foundProgramme(
  actor: Actor | null,
  { name, slug }: z.output<typeof foundProgrammeSchema>,
): Promise<{ programmeId: string }> {
  const { userId, isAdmin } = permitSelf(actor);
  if (!isAdmin) throw new Refusal('forbidden', 'Programmes are founded by administrators.', 'Ask one.');
  if (await findProgramme(slug)) {
    throw new Refusal('conflict', `There is a programme "${slug}" already.`, 'Choose another short name.', 'slug');
  }
  return inTransaction(async (transaction) => {
    const programmeId = await insertProgramme({ slug, name, isDemo: false }, transaction);
    const roles = ROLES.filter((role) => role !== 'collaborator');
    await insertMembership(programmeId, userId, roles, transaction);
    const subject = `programme:${programmeId}`;
    await recordEvent({ userId, action: 'programme.found', subject, detail: { slug, roles } }, transaction);
    return { programmeId };
  });
}
